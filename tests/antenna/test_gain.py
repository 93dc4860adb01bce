"""Reading gain off a pattern."""

import numpy as np
import pytest

from siteassess.antenna.gain import cross_gain_dbic, gain_dbic
from siteassess.antenna.pattern import GainPattern
from siteassess.antenna.shapes import FLOOR_DBIC, by_elevation, hemisphere, isotropic, uniform_cone

L1_HZ, L5_HZ = 1575.42e6, 1176.45e6
HUNDREDTH_DB = 0.01


@pytest.fixture
def lobed() -> GainPattern:
    """Depends on carrier, azimuth and elevation."""
    return GainPattern(
        name="lobed",
        carrier_hz=np.array([L5_HZ, L1_HZ]),
        azimuth_deg=np.array([0.0, 90.0, 180.0, 270.0, 360.0]),
        elevation_deg=np.array([-90.0, 0.0, 90.0]),
        gain_dbic=np.array(
            [
                [[-20, 0, 5], [-20, 2, 5], [-20, 4, 5], [-20, -6, 5], [-20, 0, 5]],
                [[-10, 1, 6], [-10, 3, 6], [-10, 5, 6], [-10, -5, 6], [-10, 1, 6]],
            ],
            dtype=float,
        ),
        cross_gain_dbic=np.full((2, 5, 3), -15.0),
    )


def test_bilinear_interpolation_agrees_with_scipy(lobed: GainPattern) -> None:
    # Authority: scipy.interpolate.RegularGridInterpolator, linear.
    from scipy.interpolate import RegularGridInterpolator

    reference = RegularGridInterpolator(
        (lobed.carrier_hz, lobed.azimuth_deg, lobed.elevation_deg), lobed.gain_dbic
    )
    random = np.random.default_rng(5)
    azimuth_deg, elevation_deg = random.uniform(0.0, 360.0, 500), random.uniform(-90.0, 90.0, 500)
    for carrier_hz in (L5_HZ, 1.3e9, L1_HZ):
        points = np.column_stack([np.full(500, carrier_hz), azimuth_deg, elevation_deg])
        expected = reference(points)
        assert gain_dbic(lobed, azimuth_deg, elevation_deg, carrier_hz) == pytest.approx(expected, abs=1e-9)


@pytest.mark.parametrize("turns", [-720.0, -360.0, 0.0, 360.0])
def test_azimuth_wraps_round(lobed: GainPattern, turns: float) -> None:
    seen = gain_dbic(lobed, np.array([0.0, 315.0, 359.999, 360.0]) + turns, 0.0, L5_HZ)
    assert seen == pytest.approx([0.0, -3.0, 0.0, 0.0], abs=HUNDREDTH_DB)


def test_outer_carriers_hold_beyond_the_table(lobed: GainPattern) -> None:
    assert gain_dbic(lobed, 0.0, 90.0, 1.0e9) == 5.0
    assert gain_dbic(lobed, 0.0, 90.0, 2.5e9) == 6.0
    assert gain_dbic(lobed, 0.0, 90.0, (L1_HZ + L5_HZ) / 2.0) == pytest.approx(5.5)


@pytest.mark.parametrize(
    ("elevation_deg", "expected_dbic"), [(-90, -20), (-45, -8), (0, 4), (45, 4.5), (90, 5)]
)
def test_zenith_horizon_and_nadir(lobed: GainPattern, elevation_deg: float, expected_dbic: float) -> None:
    assert gain_dbic(lobed, 180.0, elevation_deg, L5_HZ) == pytest.approx(expected_dbic)


def test_step_counts_its_upper_side() -> None:
    assert gain_dbic(hemisphere(), 0.0, [-1e-9, 0.0, 1e-9], L1_HZ) == pytest.approx([-200.0, 3.0103, 3.0103])
    cone = uniform_cone(60.0)  # its side stands at elevation 30
    assert gain_dbic(cone, 0.0, [29.999, 30.0], L1_HZ) == pytest.approx([FLOOR_DBIC, 6.0206], abs=1e-3)


def test_step_holds_in_a_pattern_that_depends_on_azimuth() -> None:
    levels = np.array([[[FLOOR_DBIC, FLOOR_DBIC, gain, gain] for gain in (3.0, 4.0, 3.0)]])
    pattern = GainPattern(
        name="stepped",
        carrier_hz=np.array([np.nan]),
        azimuth_deg=np.array([0.0, 180.0, 360.0]),
        elevation_deg=np.array([-90.0, 0.0, 0.0, 90.0]),
        gain_dbic=levels,
    )
    assert gain_dbic(pattern, 90.0, [-0.001, 0.0, 90.0], L1_HZ) == pytest.approx([FLOOR_DBIC, 3.5, 3.5])


SHAPES = [
    (0.0, 45.0, ()),
    (np.zeros(3), 45.0, (3,)),
    (0.0, np.full(3, 45.0), (3,)),
    (np.zeros((2, 3)), np.full((2, 3), 45.0), (2, 3)),
    (np.zeros(4), np.full((5, 1), 45.0), (5, 4)),
    (np.zeros(0), np.zeros(0), (0,)),
]


@pytest.mark.parametrize(
    ("azimuth_deg", "elevation_deg", "shape"), SHAPES, ids=lambda value: str(np.shape(value))
)
def test_gain_has_the_shape_of_its_directions(
    lobed: GainPattern, azimuth_deg: object, elevation_deg: object, shape: tuple[int, ...]
) -> None:
    for pattern in (isotropic(), lobed):
        gain = gain_dbic(pattern, azimuth_deg, elevation_deg, L5_HZ)  # type: ignore[arg-type]
        assert gain.shape == shape
        assert gain.flags.writeable


def test_unknown_direction_has_no_gain(lobed: GainPattern) -> None:
    assert np.isnan(gain_dbic(isotropic(), 0.0, np.nan, L1_HZ))
    assert np.isnan(gain_dbic(lobed, [0.0, np.nan], [np.nan, 0.0], L1_HZ)).all()


def test_cross_polar_gain_that_is_not_known_is_none(lobed: GainPattern) -> None:
    assert np.isneginf(cross_gain_dbic(isotropic(), np.zeros(2), np.zeros((3, 1)), L1_HZ)).all()
    assert cross_gain_dbic(lobed, 17.0, 23.0, L1_HZ) == pytest.approx(-15.0)


def test_azimuth_does_not_matter_where_the_pattern_does_not_know_it() -> None:
    pattern = by_elevation("plain", np.array([-90.0, 0.0, 90.0]), np.array([-20.0, -5.0, 5.0]))
    assert gain_dbic(pattern, [0.0, 123.0, 360.0], 45.0, L1_HZ).tolist() == [0.0, 0.0, 0.0]
