"""Arms, legs, hands and feet of the drawn figure, on the right of the sheet."""

from __future__ import annotations

import math

from msgspec import Struct

from handoff.document.figures.curves import Line, Path, Point, closed, loop, oval
from handoff.document.figures.proportions import Build

SOLES = 1000
FLAT = 0.3
"""Height of a ring in parts of its width: a circle seen from slightly above."""


class Region(Struct, frozen=True):
    """One region on one face: its outline, where a label points to, and the ring that goes round it."""

    path: Path
    anchor: Point
    ring: Path


def region(path: Path, anchor: Point, half: float, ring: Point | None = None, turn: float = 0.0) -> Region:
    """Return a region whose ring lies at ``ring`` (the anchor unless given) and is ``half`` wide on each side."""
    wide = half * 1.16 + 2
    return Region(path, anchor, oval(ring or anchor, wide, wide * FLAT, turn))


class Arm:
    """The arm as a tube along a straight axis that leans away from the body."""

    def __init__(self, build: Build) -> None:
        self.build = build
        self.along = Point(math.sin(build.lean), math.cos(build.lean))
        self.joint = Point(build.shoulder - build.arm, build.shoulder_top + build.arm * 0.9)
        self.top = Point(build.shoulder - build.arm * 1.15, build.shoulder_top)
        upper, fore = build.upper_arm_long, build.forearm_long
        self.pit = self.at(0.34 * upper, -0.98 * build.arm)
        rows = (
            (0.5 * upper, build.arm * 0.96),
            (upper, build.elbow),
            (upper + 0.28 * fore, build.forearm),
            (upper + fore, build.wrist),
        )
        self.outer = Line(
            self.top,
            self.at(-0.35 * build.arm, 0.78 * build.arm),
            self.at(0.16 * upper, build.arm * 1.06),
            *(self.at(far, half) for far, half in rows),
        )
        self.inner = Line(self.pit, *(self.at(far, -half) for far, half in rows))

    def at(self, far: float, out: float) -> Point:
        """Return the point ``far`` along the axis from the shoulder and ``out`` away from the body."""
        x, y = self.along
        return Point(self.joint.x + far * x + out * y, self.joint.y + far * y - out * x)

    def regions(self) -> dict[str, Region]:
        """Return upper arm, forearm and hand."""
        build, outer, inner = self.build, self.outer, self.inner
        upper, fore, long = build.upper_arm_long, build.forearm_long, build.hand
        turn = -build.lean
        return {
            "upper arm": region(
                closed(outer.part(0, 4), inner.part(2, 0), Line(self.pit, self.top).whole()),
                self.at(0.42 * upper, 0),
                build.arm,
                self.at(0.62 * upper, 0),
                turn,
            ),
            "forearm": region(
                closed(outer.part(4, 6), inner.part(4, 2)),
                self.at(upper + 0.36 * fore, 0),
                build.forearm,
                self.at(upper + 0.62 * fore, 0),
                turn,
            ),
            "hand": region(
                self._hand(), self.at(upper + fore + 0.45 * long, 0), 1.9 * build.wrist, None, turn
            ),
        }

    def _hand(self) -> Path:
        start, wide, long = (
            self.build.upper_arm_long + self.build.forearm_long,
            self.build.wrist,
            self.build.hand,
        )
        rows = (
            (0, 1), (0.14, 1.35), (0.3, 2.15), (0.5, 2.95), (0.58, 2.85), (0.55, 2.4), (0.46, 1.85),
            (0.62, 1.72), (0.86, 1.5), (0.98, 0.85), (1.0, 0), (0.95, -0.95), (0.78, -1.6),
            (0.45, -1.8), (0.15, -1.3), (0, -1),
        )  # fmt: skip
        line = Line(*(self.at(start + far * long, out * wide) for far, out in rows))
        return closed(line.whole())


class Leg:
    """The leg from hip and crotch to the sole."""

    def __init__(self, build: Build) -> None:
        self.build = build
        x, knee, ankle = build.stance, build.knee_at, build.ankle_at
        thigh, shin = knee - build.crotch, ankle - knee
        mid = build.crotch + 0.45 * thigh
        self.hip, self.crotch = Point(build.hip, build.hip_at), Point(0, build.crotch)
        centre = 0.52 * (build.hip + 2)
        below = (
            (knee, build.knee),
            (knee + 0.3 * shin, build.calf),
            (knee + 0.72 * shin, build.ankle * 1.25),
        )
        self.outer = Line(
            self.hip,
            Point(build.hip * 1.075, build.crotch + 0.06 * thigh),
            Point(0.4 * centre + 0.6 * x + 0.9 * build.thigh, mid),
            *(Point(x + half, y) for y, half in below),
            Point(x + build.ankle, ankle),
        )
        self.inner = Line(
            self.crotch,
            Point(centre - 0.98 * build.thigh, build.crotch + 0.12 * thigh),
            Point(0.4 * centre + 0.6 * x - 0.84 * build.thigh, mid),
            *(Point(x - half, y) for y, half in below),
            Point(x - build.ankle, ankle),
        )

    def lower(self, face: str) -> dict[str, Region]:
        """Return lower leg and foot."""
        build = self.build
        x, shin = build.stance, build.ankle_at - build.knee_at
        height = SOLES - build.ankle_at
        foot = self._toes(height) if face == "front" else self._heel(height)
        return {
            "lower leg": region(
                closed(self.outer.part(3, 6), self.inner.part(6, 3)),
                Point(x, build.knee_at + 0.34 * shin),
                build.calf,
                Point(x, build.knee_at + 0.6 * shin),
            ),
            "foot": region(
                foot, Point(x + 0.3 * build.ankle, build.ankle_at + 0.55 * height), 1.8 * build.ankle
            ),
        }

    def _toes(self, height: float) -> Path:
        rows = (
            (1, 0), (1.25, 0.35), (2.0, 0.75), (2.3, 0.98), (1.5, 1.12), (0, 1.1), (-1.1, 1.02),
            (-1.35, 0.75), (-1.1, 0.3), (-1, 0),
        )  # fmt: skip
        return self._foot(rows, height)

    def _heel(self, height: float) -> Path:
        rows = (
            (1, 0), (1.2, 0.4), (1.75, 0.8), (1.6, 0.96), (0.9, 1.02), (0, 1.04), (-0.9, 1.02),
            (-1.25, 0.85), (-1.15, 0.4), (-1, 0),
        )  # fmt: skip
        return self._foot(rows, height)

    def _foot(self, rows: tuple[tuple[float, float], ...], height: float) -> Path:
        x, wide, top = self.build.stance, self.build.ankle, self.build.ankle_at
        return closed(Line(*(Point(x + out * wide, top + down * height) for out, down in rows)).whole())


__all__ = ["Arm", "Leg", "Region", "loop", "region"]
