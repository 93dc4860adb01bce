"""All figures of a report."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.figures.noise_map import noise_map_svg
from siteassess.report.figures.panorama import panorama_svg
from siteassess.report.figures.skyplot import skyplot_svg
from siteassess.report.figures.time_chart import time_chart_svg
from siteassess.report.figures.waterfall import waterfall_svg

if TYPE_CHECKING:
    from siteassess.assessment import Assessment

__all__ = ["report_figures"]


def report_figures(assessment: Assessment) -> dict[str, str]:
    """Figures as SVG, by the names that the sections of a report call them."""
    return {
        "skyplot": skyplot_svg(assessment),
        "panorama": panorama_svg(assessment),
        "waterfall": waterfall_svg(assessment),
        "over-time": time_chart_svg(assessment),
        "noise-map": noise_map_svg(assessment),
    }
