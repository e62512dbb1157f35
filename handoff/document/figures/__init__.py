"""Figures as native vector drawings that Word can edit: body chart, fluid by the hour, trends."""

from __future__ import annotations

from handoff.document.figures.figure import Drawing, Figure, drawings
from handoff.document.figures.section import Figures, burn_figure, figures, fluid_figure

__all__ = ["Drawing", "Figure", "Figures", "burn_figure", "drawings", "figures", "fluid_figure"]
