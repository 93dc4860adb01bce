"""Axial ratio and polarisation loss."""

import numpy as np
import pytest

from siteassess.antenna.polarisation import axial_ratio_db, cross_level_db, polarisation_loss_db

THOUSANDTH_DB = 0.001


@pytest.mark.parametrize(
    ("cross_db", "expected_db"),
    [(-np.inf, 0.0), (-20.0, 1.743), (-10.0, 5.688), (0.0, np.inf), (20.0, 1.743)],
)
def test_axial_ratio_is_the_sum_of_the_fields_over_their_difference(
    cross_db: float, expected_db: float
) -> None:
    # Authority: definition; 1 and 0.1 give 1.1 / 0.9 or 1.743 dB, 1 and 0.3162 give 1.9249 or 5.688.
    assert axial_ratio_db(cross_db) == pytest.approx(expected_db, abs=THOUSANDTH_DB)


def test_axial_ratio_and_cross_polar_level_undo_each_other() -> None:
    ratios_db = np.array([[0.1, 0.5, 3.0], [6.0, 20.0, 100.0]])
    assert axial_ratio_db(cross_level_db(ratios_db)) == pytest.approx(ratios_db, rel=1e-6)
    assert cross_level_db(0.0) == -60.0


@pytest.mark.parametrize(
    ("antenna_db", "wave_db", "crossed_deg", "expected_db"),
    [
        (0.0, 0.0, 90.0, 0.0),
        (3.0, 0.0, 0.0, 0.125),  # (1 + r)^2 / (2 (1 + r^2)) with r = 1.4125
        (np.inf, 0.0, 17.0, 3.010),  # a linear antenna takes half of a circular wave
        (0.0, np.inf, 17.0, 3.010),
        (3.0, 3.0, 0.0, 0.0),
        (3.0, 1.2, 90.0, 0.249),
        (np.inf, np.inf, 60.0, 6.021),  # cosine squared of 60 degrees
    ],
)
def test_polarisation_loss_agrees_with_closed_forms(
    antenna_db: float, wave_db: float, crossed_deg: float, expected_db: float
) -> None:
    # Authority: textbook forms of the polarisation efficiency, by the axial ratios r and s,
    # 1/2 + (4 r s + (r^2 - 1) (s^2 - 1) cos 2x) / (2 (1 + r^2) (1 + s^2)).
    assert polarisation_loss_db(antenna_db, wave_db, crossed_deg) == pytest.approx(
        expected_db, abs=THOUSANDTH_DB
    )


def test_loss_is_the_same_by_axial_ratios() -> None:
    r, s, crossed_rad = 10 ** (4.0 / 20.0), 10 ** (1.8 / 20.0), np.deg2rad(35.0)
    aligned = (r**2 - 1.0) * (s**2 - 1.0) * np.cos(2.0 * crossed_rad)
    matched = 0.5 + (4.0 * r * s + aligned) / (2.0 * (1.0 + r**2) * (1.0 + s**2))
    assert polarisation_loss_db(4.0, 1.8, 35.0) == pytest.approx(-10.0 * np.log10(matched), abs=1e-9)
