"""The body as closed paths, region by region, front and back: a drawing of our own.

The figure stands with its palms to the front. Regions that meet share their border line; those of the
patient's right side mirror those of the left.
"""

from __future__ import annotations

from collections.abc import Mapping
from functools import lru_cache
from types import MappingProxyType

from handoff.document.figures.curves import Line, Path, Point, closed, loop, mirrored, oval
from handoff.document.figures.limbs import Arm, Leg, Region, region
from handoff.document.figures.proportions import Build

FRONT, BACK = "front", "back"
FACES = (FRONT, BACK)


@lru_cache(maxsize=8)
def body(build: Build, face: str) -> Mapping[str, Region]:
    """Return the regions of one face by name, in the order of painting: the last lies on top.

    x runs from the middle of the body to the right of the sheet, y down from the top of the head (0)
    to the soles (1000). The front shows the patient's left on the right of the sheet, the back on the left.
    """
    torso = _Torso(build)
    sided = {**torso.arm.regions(), **torso.leg.lower(face), **torso.sided(face)}
    right_of_sheet, left_of_sheet = ("left", "right") if face == FRONT else ("right", "left")
    found = {"neck": torso.neck(face), **torso.middle(face)}
    for name, one in sided.items():
        found[f"{right_of_sheet} {name}"] = one
        found[f"{left_of_sheet} {name}"] = _other_side(one)
    if face == FRONT:
        found["genitalia"] = torso.genitalia()
    found["head"] = torso.head()
    return MappingProxyType(found)


def _other_side(one: Region) -> Region:
    return Region(mirrored(one.path), Point(-one.anchor.x, one.anchor.y), mirrored(one.ring))


class _Torso:
    """Head, neck and trunk between the two arms and legs."""

    def __init__(self, build: Build) -> None:
        self.build, self.arm, self.leg = build, Arm(build), Leg(build)
        rise = build.shoulder_top - build.neck_base
        neck = Point(build.neck * 1.12, build.neck_base)
        self.slope = Line(
            Point(build.neck, build.neck_base - 0.9 * rise),
            neck,
            Point(build.neck * 1.12 + 0.4 * (self.arm.top.x - neck.x), build.neck_base + 0.5 * rise),
            self.arm.top,
        )
        pit, drop = self.arm.pit, build.hip_at - build.waist_at
        self.flank = Line(
            pit,
            Point(0.8 * pit.x + 0.2 * build.waist, 0.5 * (pit.y + build.ribs)),
            Point(0.4 * pit.x + 0.6 * build.waist, build.ribs),
            Point(build.waist, build.waist_at),
            Point(0.35 * build.waist + 0.65 * build.hip, build.waist_at + 0.55 * drop),
            self.leg.hip,
        )
        self.neck_edge, self.rib_edge = neck, self.flank.points[2]
        self.groin = Point(0.23 * build.hip, build.crotch - 0.26 * (build.crotch - build.hip_at))

    def head(self) -> Region:
        """Return the head with its ears."""
        half, chin = self.build.head, self.build.chin
        side = (
            (0.53, 0.042), (0.89, 0.2), (0.98, 0.4), (1.03, 0.45), (1.12, 0.47), (1.12, 0.56), (1.02, 0.64),
            (0.94, 0.68), (0.76, 0.86), (0.4, 0.98),
        )  # fmt: skip
        right = [(x * half, y * chin) for x, y in side]
        left = [(-x, y) for x, y in reversed(right)]
        return region(
            loop((0.0, 0.0), *right, (0.0, chin), *left), Point(0, 0.5 * chin), half, Point(0, 0.3 * chin)
        )

    def neck(self, face: str) -> Region:
        """Return the neck; the head lies over its upper end."""
        build = self.build
        top = 0.8 * build.chin
        line = Line((build.neck, top), (build.neck * 0.98, build.chin), *self.slope.points[:2])
        path = closed(
            line.whole(),
            self._collar(face).back(),
            mirrored(line.back()),
            Line((-build.neck, top), (build.neck, top)).whole(),
        )
        middle = 0.5 * (build.chin + build.neck_base + self._dip(face))
        return region(path, Point(0, middle), build.neck)

    def _dip(self, face: str) -> float:
        return (0.16 if face == FRONT else 0.05) * self.build.chin * 140 / self.build.chin

    def _collar(self, face: str) -> Line:
        x, y = self.neck_edge
        return Line((-x, y), (0, y + self._dip(face)), (x, y))

    def middle(self, face: str) -> dict[str, Region]:
        """Return the two parts of the trunk on that face."""
        build = self.build
        upper, lower = ("chest", "abdomen") if face == FRONT else ("upper back", "lower back")
        arch = -0.1 if face == FRONT else 0.02
        x, y = self.rib_edge
        ribs = Line(
            (x, y), (0.5 * x, y + 0.6 * arch * x), (0, y + arch * x), (-0.5 * x, y + 0.6 * arch * x), (-x, y)
        )
        top = closed(
            self.slope.part(1, 3), self.flank.part(0, 2), ribs.whole(), mirrored(self.flank.part(2, 0)),
            mirrored(self.slope.part(3, 1)), self._collar(face).whole(),
        )  # fmt: skip
        below = self._crease() if face == FRONT else self._seat()
        bottom = closed(self.flank.part(2, 5), below, mirrored(self.flank.part(5, 2)), ribs.back())
        pit = self.arm.pit
        return {
            upper: region(
                top,
                Point(0, 0.5 * (build.shoulder_top + build.ribs)),
                pit.x,
                Point(0, 0.45 * pit.y + 0.55 * build.ribs),
            ),
            lower: region(bottom, Point(0, build.waist_at), build.waist, Point(0, build.waist_at + 6)),
        }

    def _groin_line(self) -> Line:
        hip, groin = self.leg.hip, self.groin
        return Line(hip, (0.5 * (hip.x + groin.x), 0.5 * (hip.y + groin.y) + 0.06 * hip.x), groin)

    def _crease(self) -> Path:
        line = self._groin_line()
        top = Line(self.groin, (0, self.groin.y - 4), (-self.groin.x, self.groin.y))
        return Path(line.points[0], (*line.whole().steps, *top.whole().steps, *mirrored(line.back()).steps))

    def _seat_line(self) -> Line:
        hip = self.leg.hip
        return Line(hip, (0.5 * hip.x, hip.y - 0.06 * hip.x), (0, hip.y + 0.06 * hip.x))

    def _seat(self) -> Path:
        line = self._seat_line()
        return Path(line.points[0], (*line.whole().steps, *mirrored(line.back()).steps))

    def sided(self, face: str) -> dict[str, Region]:
        """Return the thigh, and on the back the buttock, of the right of the sheet."""
        build, leg = self.build, self.leg
        knee = build.knee_at
        at = Point(0.5 * (build.stance + 0.52 * build.hip), build.crotch + 0.36 * (knee - build.crotch))
        ring = Point(at.x, build.crotch + 0.6 * (knee - build.crotch))
        if face == FRONT:
            line = self._groin_line()
            path = closed(
                leg.outer.part(0, 3), leg.inner.part(3, 0), Line(leg.crotch, self.groin).whole(), line.back()
            )
            return {"thigh": region(path, at, 0.85 * build.thigh, ring)}
        fold_from, fold_to = leg.outer.points[1], leg.crotch
        fold = Line(fold_from, (0.5 * build.hip, fold_to.y + 0.14 * build.hip), fold_to)
        thigh = closed(leg.outer.part(1, 3), leg.inner.part(3, 0), fold.back())
        top = self._seat_line()
        seat = closed(leg.outer.part(0, 1), fold.whole(), top.back())
        middle = Point(0.5 * build.hip, 0.5 * (build.hip_at + build.crotch) + 2)
        return {
            "thigh": region(thigh, at, 0.85 * build.thigh, ring),
            "buttock": region(seat, middle, 0.5 * build.hip),
        }

    def genitalia(self) -> Region:
        """Return the genitalia: one calm shape, the same for everybody."""
        x, y = self.groin
        low = self.build.crotch + 0.14 * self.build.hip
        path = loop(
            (x, y),
            (0.7 * x, 0.45 * y + 0.55 * low),
            (0, low),
            (-0.7 * x, 0.45 * y + 0.55 * low),
            (-x, y),
            (0, y - 4),
        )
        return region(path, Point(0, 0.5 * (y + low)), x)


__all__ = ["BACK", "FACES", "FRONT", "Region", "body", "oval"]
