from itertools import pairwise

import numpy as np
import pytest
from scipy.integrate import quad
from scipy.optimize import brentq

from siteassess.horizon.curves import Curves, capped_area, curves_between, edge_elevation, level_azimuth

ROUNDING_DEG = 1e-9
QUADRATURE_SR = 1e-9


def curves_of(rows: list[tuple[float, float, float, float]], straight: bool) -> Curves:
    start, end, first, last = np.array(rows).T
    return curves_between(
        start_deg=start,
        end_deg=end,
        start_elevation_deg=first,
        end_elevation_deg=last,
        straight_in_space=np.full(len(rows), straight),
        obstacle=np.arange(len(rows)),
    )


def great_circle_deg(azimuth_deg: float, row: tuple[float, float, float, float]) -> float:
    """Elevation on the plane through the observer and two directions, by the cross product of vectors."""
    ends = []
    for azimuth, elevation in ((row[0], row[2]), (row[1], row[3])):
        a, e = np.deg2rad([azimuth, elevation])
        ends.append(np.array([np.cos(e) * np.sin(a), np.cos(e) * np.cos(a), np.sin(e)]))
    normal = np.cross(*ends)
    a = np.deg2rad(azimuth_deg)
    return float(np.rad2deg(np.arctan(-(normal[0] * np.sin(a) + normal[1] * np.cos(a)) / normal[2])))


ARCS = [
    (10.0, 130.0, 8.0, 20.0),
    (300.0, 400.0, 45.0, -3.0),
    (200.0, 378.0, 1.0, 2.0),
    (50.0, 51.0, 89.0, 70.0),
]


@pytest.mark.parametrize("row", ARCS)
def test_straight_edges_are_arcs_of_great_circles(row: tuple[float, float, float, float]) -> None:
    # Authority: plane geometry with vectors; the arc is the plane through the eye and the edge.
    curves = curves_of([row], straight=True)
    for index in range(len(curves) - 1):
        azimuths_deg = np.linspace(curves.start_deg[index], curves.end_deg[index], 7)
        seen = edge_elevation(curves, np.full(7, index), azimuths_deg)
        expected = [great_circle_deg(azimuth, row) for azimuth in azimuths_deg]
        np.testing.assert_allclose(seen, expected, atol=ROUNDING_DEG)


@pytest.mark.parametrize("row", ARCS)
def test_pieces_of_arcs_are_monotonic_and_join(row: tuple[float, float, float, float]) -> None:
    curves = curves_of([row], straight=True)
    widths_deg = (curves.end_deg - curves.start_deg)[:-1]
    assert widths_deg.sum() == pytest.approx(row[1] - row[0], abs=ROUNDING_DEG)
    for index in range(len(curves) - 1):
        azimuths_deg = np.linspace(curves.start_deg[index], curves.end_deg[index], 101)
        elevation_deg = edge_elevation(curves, np.full(101, index), azimuths_deg)
        steps = np.diff(elevation_deg)
        assert (steps > -ROUNDING_DEG).all() or (steps < ROUNDING_DEG).all()
        assert (elevation_deg > -ROUNDING_DEG).all() or (elevation_deg < ROUNDING_DEG).all()


@pytest.mark.parametrize("straight", [False, True])
@pytest.mark.parametrize("cap_deg", [-90.0, 0.0, 5.0, 12.5, 90.0])
@pytest.mark.parametrize("row", [*ARCS, (0.0, 90.0, 10.0, 10.0), (90.0, 90.001, 0.0, 80.0)])
def test_capped_area_is_the_integral_of_the_sine(
    row: tuple[float, float, float, float], cap_deg: float, straight: bool
) -> None:
    # Authority: adaptive quadrature of scipy over the same edge.
    curves = curves_of([row], straight)
    index = np.arange(len(curves) - 1)
    closed = capped_area(curves, index, curves.start_deg[:-1], curves.end_deg[:-1], cap_deg).sum()

    def integrand(azimuth_rad: float) -> float:
        azimuth_deg = float(np.rad2deg(azimuth_rad))
        part = (azimuth_deg - row[0]) / (row[1] - row[0])
        level_deg = great_circle_deg(azimuth_deg, row) if straight else row[2] + part * (row[3] - row[2])
        return float(np.sin(np.deg2rad(min(level_deg, cap_deg))))

    breaks = np.deg2rad(np.linspace(row[0], row[1], 41))
    parts = [quad(integrand, low, high, epsabs=1e-11, limit=100)[0] for low, high in pairwise(breaks)]
    assert closed == pytest.approx(sum(parts), abs=QUADRATURE_SR)


def test_a_level_is_passed_where_a_root_finder_says() -> None:
    # Authority: Brent's method of scipy.
    row = (10.0, 130.0, 8.0, 20.0)
    curves = curves_of([row], straight=True)
    index = np.array([0])
    found = level_azimuth(curves, index, curves.start_deg[:1], curves.end_deg[:1], np.array([15.0]))
    expected = brentq(
        lambda azimuth: great_circle_deg(azimuth, row) - 15.0, curves.start_deg[0], curves.end_deg[0]
    )
    assert found[0] == pytest.approx(expected, abs=ROUNDING_DEG)


def test_vertical_edges_and_absent_ones_leave_no_curve() -> None:
    curves = curves_of([(10.0, 10.0, 0.0, 50.0), (20.0, 30.0, -90.0, -90.0)], straight=False)
    assert len(curves) == 1
    assert edge_elevation(curves, np.array([-1]), np.array([123.0])).tolist() == [-90.0]
