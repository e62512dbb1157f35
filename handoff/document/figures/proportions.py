"""The build of the drawn figure as infant, child and adult.

These are choices of drawing, not measures of patients: no burned area is worked out from them. The
figure changes at the first and at the twelfth birthday, where it would begin to look wrong.
"""

from __future__ import annotations

from msgspec import Struct

CHILD_FROM_YEARS = 1
ADULT_FROM_YEARS = 12


class Build(Struct, frozen=True):
    """Heights from the top of the head (0) to the soles (1000), and half widths, of one figure."""

    name: str
    head: float
    chin: float
    neck: float
    neck_base: float
    shoulder: float
    shoulder_top: float
    ribs: float
    waist: float
    waist_at: float
    hip: float
    hip_at: float
    crotch: float
    thigh: float
    knee: float
    knee_at: float
    calf: float
    ankle: float
    ankle_at: float
    stance: float
    arm: float
    elbow: float
    forearm: float
    wrist: float
    upper_arm_long: float
    forearm_long: float
    hand: float
    lean: float


ADULT = Build(
    name="adult",
    head=52, chin=140, neck=27, neck_base=172,
    shoulder=112, shoulder_top=194, ribs=334, waist=72, waist_at=392,
    hip=85, hip_at=466, crotch=522,
    thigh=43, knee=25, knee_at=725, calf=28, ankle=13, ankle_at=945, stance=52,
    arm=23, elbow=16, forearm=18, wrist=11, upper_arm_long=170, forearm_long=140, hand=86, lean=0.27,
)  # fmt: skip

CHILD = Build(
    name="child",
    head=66, chin=182, neck=27, neck_base=210,
    shoulder=112, shoulder_top=230, ribs=360, waist=80, waist_at=420,
    hip=84, hip_at=500, crotch=558,
    thigh=42, knee=26, knee_at=750, calf=28, ankle=15, ankle_at=945, stance=50,
    arm=23, elbow=17, forearm=18, wrist=12, upper_arm_long=156, forearm_long=124, hand=80, lean=0.29,
)  # fmt: skip

INFANT = Build(
    name="infant",
    head=96, chin=252, neck=34, neck_base=270,
    shoulder=130, shoulder_top=292, ribs=436, waist=98, waist_at=510,
    hip=106, hip_at=598, crotch=664,
    thigh=52, knee=37, knee_at=805, calf=38, ankle=23, ankle_at=935, stance=60,
    arm=34, elbow=26, forearm=28, wrist=16, upper_arm_long=138, forearm_long=108, hand=84, lean=0.32,
)  # fmt: skip


def build_for(years: int | None) -> Build:
    """Return the build of that age in completed years; the adult's where the age is not recorded."""
    if years is None or years >= ADULT_FROM_YEARS:
        return ADULT
    return CHILD if years >= CHILD_FROM_YEARS else INFANT
