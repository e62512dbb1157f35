"""An invented assessment that fills every section, made by hand without any plugin."""

from __future__ import annotations

from datetime import datetime, timedelta
from pathlib import Path

from msgspec.structs import replace

from handoff.assess import Assessment, Failure
from handoff.parameters import Source
from handoff.plugin import (
    Action,
    Findings,
    Flag,
    Input,
    Item,
    Part,
    PatientState,
    Plugin,
    System,
    Urgency,
    Working,
)
from handoff.policy import Policy
from handoff.state.faults import Fault, Severity
from handoff.state.reader import read_nodes

STEM = "ferrandel"
SOURCE = Source("who", "World Example Group. Burn care.", "Annex 3", "guideline")
MEMORY = Source("none", "", "", "from memory")


def state(text: str = "") -> PatientState:
    """Return the invented patient, or the one in ``text``."""
    written = text or (Path(__file__).parent / "patient.yaml").read_text()
    root, faults = read_nodes(written, "ferrandel.yaml")
    assert not faults
    return PatientState(root, "ferrandel.yaml")


def at(patient: PatientState, time: str, day: str = "2026-03-14") -> datetime:
    """Return a time of the invented day."""
    return patient.clock.read(f"{day} {time}")


def item(
    key: str, label: str, shown: str, part: Part, system: System = System.GENERAL, **more: object
) -> Item:
    """Return an item that repeats what was charted unless told otherwise."""
    given: dict[str, object] = {"value": shown, "repeats": True, **more}
    return Item(key=key, label=label, shown=shown, part=part, system=system, **given)  # type: ignore[arg-type]


def missing(
    key: str, label: str, part: Part, system: System = System.GENERAL, rank: int | None = None
) -> Item:
    """Return an item that is not recorded."""
    return Item(
        key=key,
        label=label,
        shown="not recorded",
        part=part,
        system=system,
        flag=Flag.NOT_RECORDED,
        repeats=True,
        rank=rank,
    )


def items(patient: PatientState) -> tuple[Item, ...]:
    """Return items for every part, every flag and many systems."""
    s, b, a, r = Part.SITUATION, Part.BACKGROUND, Part.ASSESSMENT, Part.RECOMMENDATION
    two, three, five = at(patient, "14:15"), at(patient, "16:00"), at(patient, "17:00")
    worked = Working(
        formula="crystalloid in 24 h = coefficient x weight x counted burn",
        sum="4 mL/kg/% x 82 kg x 36.5 % = 11,972 mL",
        inputs=(
            Input("weight", "82 kg", 12),
            Input("counted burn", "36.5 %"),
            Input("coefficient", "4 mL/kg/%", 31),
        ),
        rule="parkland",
    )
    return (
        item("handover.severity", "Severity, in the nurse's own word", "sick, may worsen", s, as_of=five),
        item("injury.causes", "Cause", "flame (enclosed space, smoke breathed: yes)", s),
        item(
            "injury.what_happened",
            "What happened",
            "Asleep when a kitchen fire filled the flat with smoke; carried out by a neighbour.",
            s,
        ),
        item("injury.at", "Time of burn", "Sat 14 Mar 2026 13:20", s),
        item(
            "injury.hours_since",
            "Hours since burn",
            "6 h 10 min",
            s,
            as_of=patient.clock.read("2026-03-14 19:30"),
        ),
        item(
            "patient.resuscitation",
            "Resuscitation decision",
            "full treatment; decided by Dr A. Quill, Sat 14 Mar 2026 14:40, form seen: not recorded",
            s,
        ),
        missing("injury.lost_consciousness", "loss of consciousness", s, System.DISABILITY),
        item("patient.allergies", "Allergies", "penicillin, rash", b),
        item("patient.weight", "Weight, before burn", "82 kg (estimated)", b, as_of=two),
        item("patient.history", "Past illness", "type 2 diabetes", b),
        item("patient.medicines", "Medicines before the burn", "metformin 500 mg twice daily", b),
        item("injury.first_aid", "First aid", "cooled for 20 min, from 13:30", b),
        missing("injury.tetanus", "tetanus", b),
        item(
            "line.1",
            "IV cannula 16 G",
            "left antecubital fossa, placed Sat 14 Mar 2026 14:00, day 1",
            b,
            System.LINES,
        ),
        item("line.2", "Urinary catheter", "placed Sat 14 Mar 2026 14:25, day 1", b, System.LINES),
        item(
            "event.1",
            "Advice from burn centre",
            "hourly hand checks, by on-call burns registrar",
            b,
            as_of=at(patient, "14:50"),
        ),
        item(
            "airway_watch.signs_present",
            "Airway signs present",
            "3: hoarse voice, soot in mouth, singed nasal hair",
            a,
            System.AIRWAY,
            as_of=two,
            flag=Flag.ACTION,
            rank=10,
            repeats=False,
            value=3,
            sources=(SOURCE,),
            cautions=("Swelling can close the airway hours after the burn.",),
        ),
        item(
            "airway_watch.stridor",
            "Stridor",
            "not reassessed since 14:15",
            a,
            System.AIRWAY,
            as_of=two,
            flag=Flag.REVIEW,
            rank=11,
        ),
        item(
            "airway_watch.carboxyhaemoglobin_now",
            "Carboxyhaemoglobin, estimated now",
            "4.6 % (3 to 8 %)",
            a,
            System.BREATHING,
            as_of=two,
            flag=Flag.REVIEW,
            rank=20,
            repeats=False,
            value=4.6,
            sources=(MEMORY,),
            working=Working(formula="half-life on oxygen", sum="18 % x 0.5^(5.25 h / 1.5 h) = 1.6 %"),
        ),
        item(
            "vital.resp",
            "Breaths",
            "24 /min; before: 26 /min at 14:15",
            a,
            System.BREATHING,
            as_of=three,
            flag=Flag.REVIEW,
        ),
        item(
            "vital.spo2",
            "Oxygen saturation by pulse oximeter",
            "98 %; before: 99 % at 14:15",
            a,
            System.BREATHING,
            as_of=three,
            flag=Flag.REVIEW,
        ),
        item(
            "vital.pulse",
            "Pulse",
            "112 /min; before: 124 /min at 14:15, 120 /min at 15:00, 118 /min at 16:00",
            a,
            System.CIRCULATION,
            as_of=five,
        ),
        item(
            "vital.bp",
            "Blood pressure",
            "112/66 mmHg; before: 104/62 mmHg at 14:15, 102/60 mmHg at 15:00",
            a,
            System.CIRCULATION,
            as_of=five,
        ),
        missing("vital.consciousness", "consciousness", a, System.DISABILITY),
        item(
            "vital.temp",
            "Temperature",
            "36.4 C; before: 35.8 C (tympanic) at 14:15",
            a,
            System.EXPOSURE,
            as_of=five,
        ),
        item(
            "area.counted",
            "Counted burn",
            "36.5 %TBSA (Lund-Browder, E. Marsh RN)",
            a,
            System.BURN,
            as_of=two,
            repeats=False,
            value=36.5,
            sources=(SOURCE,),
            working=Working(
                formula="sum of the counted regions",
                sum="3.5 + 1 + 9.1 + 4 + 3 + 1.5 = 22.1 %",
                rule="lund-browder",
            ),
        ),
        item("area.full_thickness", "Full thickness", "7 %TBSA", a, System.BURN, as_of=two),
        item(
            "limb.right_arm",
            "Right arm, circumferential",
            "radial pulse by Doppler weak, fingers cool",
            a,
            System.LIMBS,
            as_of=five,
            flag=Flag.ACTION,
            rank=40,
            cautions=("A falling pulse may be late.",),
        ),
        item(
            "fluid.total_24h",
            "Crystalloid in 24 h, formula estimate",
            "11,972 mL",
            a,
            System.FLUID,
            repeats=False,
            value=11972.0,
            sources=(SOURCE, MEMORY),
            working=worked,
            cautions=("The formula may be low after smoke inhalation.",),
        ),
        item(
            "fluid.urine_rate",
            "Urine, last hour",
            "0.5 mL/kg/h (41 mL); target 0.5 to 1 mL/kg/h",
            a,
            System.FLUID,
            as_of=five,
            repeats=False,
            value=0.5,
            sources=(SOURCE,),
            working=Working(formula="urine / weight / time", sum="41 mL / 82 kg / 1 h = 0.5 mL/kg/h"),
        ),
        item(
            "fluid.rate_now",
            "Planned rate now, formula estimate",
            "748 mL/h to 21:20",
            a,
            System.FLUID,
            repeats=False,
            value=748.0,
            sources=(SOURCE,),
            working=worked,
        ),
        item(
            "fluid.given",
            "Given since the burn, confirmed",
            "2,370 mL; 1,900 mL more not confirmed since 17:00",
            a,
            System.FLUID,
            as_of=five,
            flag=Flag.REVIEW,
        ),
        item(
            "pain.latest",
            "Pain at rest, numeric 0 to 10",
            "6; before: 9 at 14:15; goal 3",
            a,
            System.PAIN,
            as_of=at(patient, "15:00"),
            flag=Flag.REVIEW,
        ),
        item(
            "pain.opioid",
            "Opioid exposure in 24 h, charted 14:12 to 19:30",
            "12 mg oral morphine equivalent",
            a,
            System.PAIN,
            repeats=False,
            value=12.0,
            sources=(SOURCE,),
            cautions=("Exposure only; it is not a dose to give.",),
        ),
        missing("pain.sedation", "sedation score", a, System.PAIN, rank=15),
        item("result.potassium", "Potassium", "5.4 mmol/L", a, as_of=two),
        item("result.lactate", "Lactate", "3.9 mmol/L", a, as_of=two),
        item("fluid.detail", "Catch-up rate", "1,020 mL/h for 2 h", a, System.FLUID, detail=True),
        item(
            "handover.concerns",
            "Concerns",
            "Voice hoarser since 16:00, wants anaesthetic review repeated",
            r,
            as_of=five,
        ),
        item(
            "area.referral",
            "Meets referral criteria",
            "area over the limit for adults; circumferential; inhalation",
            r,
            System.BURN,
            repeats=False,
            value="yes",
            sources=(SOURCE,),
        ),
        missing("handover.to", "handed over to", r),
    )


def actions(patient: PatientState) -> tuple[Action, ...]:
    """Return actions of every urgency and rhythm."""
    hour, quarter = timedelta(hours=1), timedelta(minutes=15)
    eight = at(patient, "20:00")
    return (
        Action(
            key="handover.request.1",
            area="Planned and awaited",
            text="Escharotomy decision for right arm awaited from burns registrar",
            why="asked for at the last handover",
            system=System.GENERAL,
            urgency=Urgency.NOW,
        ),
        Action(
            key="handover.to_do.1",
            area="Planned and awaited",
            text="Dressing change with analgesia before it",
            why="planned at the last handover",
            system=System.GENERAL,
            first_due=at(patient, "20:30"),
            urgency=Urgency.TIMED,
        ),
        Action(
            key="airway_watch.signs",
            area="Airway",
            text="Look for voice change, stridor, swelling; head up",
            why="swelling grows for a day",
            system=System.AIRWAY,
            first_due=at(patient, "15:15"),
            every=hour,
            urgency=Urgency.NOW,
            sources=(SOURCE,),
        ),
        Action(
            key="airway_watch.mouth",
            area="Airway",
            text="Mouth care, soot seen in sputum noted",
            why="comfort and a sign of injury below the cords",
            system=System.AIRWAY,
            first_due=eight,
            every=timedelta(hours=4),
            urgency=Urgency.TIMED,
        ),
        Action(
            key="vital.check",
            area="Observations",
            text="Breaths, SpO2, pulse, blood pressure, consciousness, temperature",
            why="early change shows in the trend",
            system=System.CIRCULATION,
            first_due=at(patient, "18:00"),
            every=hour,
            urgency=Urgency.TIMED,
            sources=(SOURCE,),
        ),
        Action(
            key="fluid.urine",
            area="Fluid",
            text="Measure urine and write it per kg; tell the doctor when under target for two hours",
            why="urine leads the rate",
            system=System.FLUID,
            first_due=eight,
            every=hour,
            urgency=Urgency.TIMED,
            sources=(SOURCE,),
            cautions=("The rate is changed by prescription.",),
        ),
        Action(
            key="fluid.line",
            area="Fluid",
            text="See R1 running and chart it",
            why="only what was seen running counts as given",
            system=System.FLUID,
            first_due=at(patient, "19:30"),
            every=hour,
            urgency=Urgency.TIMED,
        ),
        Action(
            key="limb.right",
            area="Limb perfusion",
            text="Right hand: warmth, colour, Doppler pulse, movement, pain on stretch",
            why="circumferential burn can close the vessels",
            system=System.LIMBS,
            first_due=at(patient, "19:30"),
            every=quarter,
            urgency=Urgency.TIMED,
        ),
        Action(
            key="limb.raise",
            area="Limb perfusion",
            text="Right arm raised above the heart",
            why="less swelling",
            system=System.LIMBS,
            urgency=Urgency.ONGOING,
        ),
        Action(
            key="pain.score",
            area="Pain and sedation",
            text="Pain score at rest and in movement, with sedation and breaths",
            why="last score 6 at 15:00, goal 3",
            system=System.PAIN,
            first_due=at(patient, "15:30"),
            every=timedelta(hours=2),
            urgency=Urgency.TIMED,
        ),
        Action(
            key="pain.after",
            area="Pain and sedation",
            text="Sedation and breaths after the dressing change",
            why="the painful stimulus ends before the drug does",
            system=System.PAIN,
            first_due=at(patient, "21:00"),
            every=quarter,
            urgency=Urgency.TIMED,
        ),
        Action(
            key="wound.next",
            area="Wounds and dressings",
            text="Next dressing of the trunk",
            why="changed every second day",
            system=System.WOUND,
            first_due=at(patient, "10:00", "2026-03-16"),
            urgency=Urgency.TIMED,
        ),
        Action(
            key="line.check",
            area="Lines, tubes and drains",
            text="Look at site, fixing and day count: IV cannula 16 G, urinary catheter",
            why="infection and loss of a line show at the site first",
            system=System.LINES,
            first_due=at(patient, "19:30"),
            every=timedelta(hours=8),
            urgency=Urgency.TIMED,
        ),
        Action(
            key="people.family",
            area="Patient and family",
            text="Tell the sister what changed, one named contact",
            why="told last at 15:30",
            system=System.PEOPLE,
            urgency=Urgency.SHIFT,
        ),
    )


def findings(patient: PatientState) -> dict[str, Findings]:
    """Return what the area and fluid plugins pass on for the tables."""
    burns = (
        ("head", "front", "deep partial", 3.5, True, False, 31),
        ("trunk", "front", "deep partial", 9.1, True, False, 33),
        ("right upper arm", "", "full thickness", 4.0, True, True, 34),
        ("trunk", "back", "epidermal", 3.9, False, False, 37),
    )
    start = at(patient, "13:20")
    hours = tuple(
        (
            n + 1,
            start + timedelta(hours=n),
            748.25,
            600.0 if n < 4 else 0.0,
            0.0 if n < 4 else 760.0,
            22.0 if n < 4 else None,
            "" if n < 4 else "not recorded",
        )
        for n in range(7)
    )
    return {"area": Findings(values={"burns": burns}), "fluid": Findings(values={"hours": hours})}


def assessment(policy: Policy | None = None) -> Assessment:
    """Return the whole invented assessment, with a failure and an unusual value."""
    patient = state()
    plugin = Plugin("fluid", "Fluid and urine", "none", lambda case: Findings())
    return Assessment(
        state=patient,
        now=at(patient, "19:30"),
        policy=policy or Policy(unit_name="Example Burn Unit"),
        items=items(patient),
        actions=actions(patient),
        findings=findings(patient),
        failures=(
            Failure("pain", "Pain and sedation", "stopped with ZeroDivisionError (totals.py, line 40)"),
        ),
        warnings=(
            Fault(
                61,
                9,
                "fluid.given[2].volume",
                "9000 mL is unusual",
                "check it and write confirmed: yes",
                Severity.UNUSUAL,
            ),
        ),
        plugins=(plugin,),
    )


def bare() -> Assessment:
    """Return an assessment of a file that holds only a name, without any plugin."""
    patient = state("handoff: 1\nclock: Europe/Dublin\npatient: {name: unknown}\ninjury: {}\n")
    made = assessment()
    return replace(
        made, state=patient, items=(), actions=(), findings={}, failures=(), warnings=(), plugins=()
    )
