"""An order that was ended is said to be ended: it does not run on, and it is never "not recorded"."""

from __future__ import annotations

from typing import Any

from handoff.plugin import Flag

from .build import assessed, burned, computed, faults, item, order, value

FIRST = "2026-03-14 08:30"
LATER = "2026-03-14 10:00"
END = "2026-03-14 11:00"
BARE = {"at": END, "ended": END}


def patient(*orders: dict[str, Any], **more: Any) -> dict[str, Any]:
    return burned(orders=list(orders), **more)


def test_an_entry_that_only_ends_ends_the_order_in_force() -> None:
    found = assessed(patient(order(at=FIRST), BARE))
    shown = item(found, "order")
    assert shown.shown == "order of 08:30 ended 11:00; no order in force since"
    assert (shown.flag, shown.rank) == (Flag.REVIEW, 45)
    assert value(found, "rate_now") is None
    assert item(found, "rate_now").shown.startswith("no order in force; ")


def test_it_says_the_same_in_the_order_itself() -> None:
    own, bare = computed(patient(order(at=FIRST, ended=END))), computed(patient(order(at=FIRST), BARE))
    assert [one.shown for one in own.items] == [one.shown for one in bare.items]


def test_an_earlier_order_that_nobody_ended_is_asked_about() -> None:
    rate = {"at": LATER, "rate": "700 mL/h"}
    for orders in ([order(at=FIRST), {**rate, "ended": END}], [order(at=FIRST), rate, BARE]):
        found = computed(patient(*orders))
        shown = item(found, "order")
        assert shown.shown == "order of 10:00 ended 11:00; earlier order of 08:30 not ended: ask which holds"
        assert (shown.flag, shown.rank) == (Flag.REVIEW, 45)
        assert item(found, "rate_now").rank is None
        said = " ".join(one.shown for one in found.items if one.key.startswith("fluid."))
        assert "no order recorded" not in said


def test_an_order_after_the_end_is_in_force() -> None:
    rate = {"at": "2026-03-14 11:30", "rate": "700 mL/h"}
    assert value(computed(patient(order(at=FIRST), BARE, rate)), "rate_now") == 700


def test_an_order_ended_after_the_first_24_h_asks_for_nothing() -> None:
    late = "2026-03-15 12:00"
    shown = item(computed(patient(order(at=FIRST, ended=late)), "2026-03-15 14:00"), "order")
    assert (shown.flag, shown.rank) == (Flag.NONE, None)
    assert "ended 12:00" in shown.shown


def test_an_entry_that_only_ends_the_urine_target() -> None:
    urine = {"at": FIRST, "urine_target": {"from": "75 mL/h", "to": "100 mL/h"}}
    open_, ended = computed(patient(urine)), computed(patient(urine, BARE))
    assert "order of 08:30" in item(open_, "urine_target").label + item(open_, "urine_target").shown
    assert "order of 08:30" not in item(ended, "urine_target").label + item(ended, "urine_target").shown


def test_an_end_that_may_mean_two_orders_or_none_is_refused() -> None:
    cure = "write ended: in the order that it ends"
    urine = {"at": LATER, "urine_target": {"from": "75 mL/h"}}
    assert faults(patient(BARE)) == [
        f"fluid.orders[1].ended: no order was in force at that time; {cure}",
    ]
    assert faults(patient(order(at=FIRST), urine, BARE)) == [
        f"fluid.orders[3].ended: two orders were in force at that time; {cure}",
    ]
    assert not faults(patient(order(at=FIRST, urine_target={"from": "75 mL/h"}), BARE))
