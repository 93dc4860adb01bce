"""Trees as tall as they will be: their tops raised where the survey says how far away they stand."""

from dataclasses import replace

import numpy as np

from siteassess.horizon.survey.checks import cover_of
from siteassess.horizon.survey.rows import Rows

__all__ = ["grown"]

NEAREST_M = 0.001  # nearer to the instrument's vertical axis a top has no elevation to gain


def grown(rows: Rows, years: float, growth_m_per_year: float) -> Rows:
    """Rows of a survey with the tops of foliage raised by some years of growth.

    A top at the horizontal distance d and elevation el goes up to arctan(tan(el) + growth years / d). Its
    distance, depth and underside stay, and so do rows without a distance.

    Parameters
    ----------
    rows : Rows
        Without mistakes.
    years : float
        Years of growth.
    growth_m_per_year : float
        Growth of those rows that do not say it themselves [m/year].
    """
    foliage = np.zeros(len(rows.line), dtype=np.bool_)
    for label, which in rows.by_label().items():
        foliage[which] = label is not None and cover_of(rows, which) == "foliage"
    elevation_deg = rows.numbers["elevation_deg"]
    horizontal_m = rows.slant_m * np.cos(np.deg2rad(elevation_deg))
    own = rows.numbers["growth_m_per_year"]
    rise_m = years * np.where(np.isnan(own), growth_m_per_year, own)
    raised = foliage & (horizontal_m > NEAREST_M) & (rise_m > 0.0)
    tangent = np.tan(np.deg2rad(elevation_deg[raised])) + rise_m[raised] / horizontal_m[raised]
    numbers = {name: values.copy() for name, values in rows.numbers.items()}
    numbers["elevation_deg"][raised] = np.rad2deg(np.arctan(tangent))
    numbers["distance_m"][raised] = horizontal_m[raised]
    numbers["slant_distance_m"][raised] = np.nan
    return replace(rows, numbers=numbers)
