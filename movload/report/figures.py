"""The figures a person asks for: the truss as it stands, influence lines beneath it, and a peak with its vehicle."""

from __future__ import annotations

from movload.report.drawing.frame import SUFFIXES, figure_bytes
from movload.report.drawing.influence_sheet import influence_figure
from movload.report.drawing.peak_sheet import peak_figure
from movload.report.drawing.standing import elevation_figure

__all__ = ["SUFFIXES", "elevation_figure", "figure_bytes", "influence_figure", "peak_figure"]
