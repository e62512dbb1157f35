"""Who could be taken for whom, and whether two files are of one patient."""

from __future__ import annotations

import pytest
from msgspec.structs import replace

from handoff.shift.alike import mixed_up, names_alike
from handoff.shift.people import DifferentPatients, Person, same_patient

FERRANDEL = Person("Tomas Ferrandel", "1985-02-11", (("record_number", "HSH-204518"),))


@pytest.mark.parametrize(
    ("one", "other"),
    [
        ("Tomas Ferrandel", "Ana Ferrandel"),
        ("Tomas Ferrandel", "Tomas Ferrandal"),
        ("Tomas Ferrandel", "Maria Ferandel"),
        ("Tomas Ferrandel", "Maria Ferrandell"),
        ("Tomas Ferrandel", "Maria Ferradnel"),
        ("Tomas Ferrandel", "Ferrandel Tomas"),
        ("Tomas Ferrandel", "Ferrandel, Ines"),
        ("Tomás Ferrandel", "tomas  FERRANDEL"),
        ("Ann O'Neill", "Bea Oneill"),
        ("Ann Reid", "Bea Reed"),
        ("Jon Wu", "Lee Wu"),
        ("José Ibáñez", "Ana Ibanez"),
        ("Thomas Ferrant", "Tomas Ferrand"),
    ],
)
def test_names_that_are_easily_mixed_up_are_alike_both_ways(one: str, other: str) -> None:
    assert names_alike(one, other)
    assert names_alike(other, one)


@pytest.mark.parametrize(
    ("one", "other"),
    [
        ("Tomas Ferrandel", "Marek Szolnoki"),
        ("Tomas Ferrandel", "Tomas Okello"),
        ("Jon Wu", "Lee Wo"),
        ("", "Tomas Ferrandel"),
        ("unknown", "unknown"),
        ("Ann Reid", "Bea Reines"),
    ],
)
def test_names_far_apart_are_not(one: str, other: str) -> None:
    assert not names_alike(one, other)
    assert not names_alike(other, one)


def test_each_two_are_named_once_with_what_tells_them_apart() -> None:
    sister = Person("Ines Ferrandel", "1990-01-02", (("record_number", "HSH-9"),))
    lines = mixed_up([("A", FERRANDEL), ("B", sister), ("C", FERRANDEL)])
    assert lines == (
        "two patients with similar names: A and B",
        "the same patient twice: A and C",
        "two patients with similar names: B and C",
    )


def test_one_number_in_common_is_the_same_patient_whatever_the_name_and_the_kind_of_number() -> None:
    other = Person("unknown", "", (("temporary", "HSH-204518"),))
    assert mixed_up([("A", FERRANDEL), ("B", other)]) == ("the same patient twice: A and B",)


def test_two_unidentified_patients_are_named_and_never_one() -> None:
    one, other = (Person("unknown", "", (("temporary", number),)) for number in ("T-1", "T-2"))
    (line,) = mixed_up([("A", one), ("B", other)])
    assert line == "two unidentified patients, told apart by their numbers alone: A and B"


def test_the_same_patient_is_passed_without_a_word() -> None:
    assert same_patient(FERRANDEL, replace(FERRANDEL, name="tomas  ferrandel")) == ()


@pytest.mark.parametrize(
    ("changes", "said"),
    [
        ({"name": "Marek Szolnoki"}, "name: Tomas Ferrandel and Marek Szolnoki"),
        ({"born": "1985-11-02"}, "birth date: 11 Feb 1985 and 2 Nov 1985"),
        ({"identifiers": (("record_number", "HSH-204519"),)}, "record number: HSH-204518 and HSH-204519"),
    ],
)
def test_a_different_patient_is_refused_with_what_differs_and_what_to_do(
    changes: dict[str, object], said: str
) -> None:
    with pytest.raises(DifferentPatients) as refused:
        same_patient(FERRANDEL, replace(FERRANDEL, **changes))  # type: ignore[arg-type]
    assert refused.value.lines[0] == "these are not the same patient; nothing was joined"
    assert len(refused.value.lines) == 2
    assert refused.value.lines[1].startswith(said)
    assert ";" in refused.value.lines[1]


def test_everything_that_differs_is_said_at_once() -> None:
    other = Person("Marek Szolnoki", "1996-11-30", (("record_number", "HSH-311907"),))
    with pytest.raises(DifferentPatients) as refused:
        same_patient(FERRANDEL, other)
    assert [line.partition(":")[0] for line in refused.value.lines[1:]] == [
        "name",
        "birth date",
        "record number",
    ]


def test_a_temporary_number_that_became_the_earlier_one_is_allowed_and_said() -> None:
    unknown = Person("unknown", "", (("temporary", "T-0071"),))
    known = replace(FERRANDEL, identifiers=(("record_number", "HSH-204518"), ("earlier", "T-0071")))
    assert same_patient(unknown, known) == (
        "temporary T-0071 of the earlier file is kept as the earlier identifier",
        "the name was unknown and is now Tomas Ferrandel",
    )


def test_an_unknown_patient_without_that_link_is_refused() -> None:
    unknown = Person("unknown", "", (("temporary", "T-0071"),))
    with pytest.raises(DifferentPatients):
        same_patient(unknown, FERRANDEL)
    with pytest.raises(DifferentPatients):
        same_patient(unknown, replace(unknown, identifiers=()))


def test_a_temporary_number_may_be_replaced_and_kept_and_the_new_number_differ() -> None:
    unknown = Person("unknown", "", (("temporary", "T-1"),))
    later = Person("unknown", "", (("temporary", "T-2"), ("earlier", "T-1")))
    assert same_patient(unknown, later) == (
        "temporary T-1 of the earlier file is kept as the earlier identifier",
    )


def test_a_name_kept_under_earlier_names_is_allowed_and_said_but_not_with_another_number() -> None:
    married = replace(FERRANDEL, name="Tomas Brisk", earlier_names=("Tomas Ferrandel",))
    assert same_patient(FERRANDEL, married) == ("the name was Tomas Ferrandel and is now Tomas Brisk",)
    with pytest.raises(DifferentPatients):
        same_patient(FERRANDEL, replace(married, identifiers=(("record_number", "X"),)))


def test_a_name_alone_is_not_enough() -> None:
    bare = Person("Tomas Ferrandel", "", ())
    with pytest.raises(DifferentPatients, match="two identifiers are needed"):
        same_patient(bare, bare)
    with pytest.raises(DifferentPatients):
        same_patient(bare, FERRANDEL)


def test_name_with_birth_date_or_name_with_number_is_enough() -> None:
    assert same_patient(replace(FERRANDEL, born=""), FERRANDEL) == ()
    assert same_patient(replace(FERRANDEL, identifiers=()), FERRANDEL) == ()
