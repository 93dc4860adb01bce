from dataclasses import dataclass
from datetime import datetime

import numpy as np
import pytest

from siteassess.orbits.constellations import nominal_orbits
from siteassess.sky_tracks.density import sky_density
from siteassess.sky_tracks.tracks import SkyTracks, sky_tracks

START = datetime(2026, 1, 1)


@dataclass(frozen=True)
class Point:
    latitude_deg: float
    longitude_deg: float
    height_m: float


def tracks_of(
    azimuth_deg: list[list[float]], elevation_deg: list[list[float]], own_epochs: list[int]
) -> SkyTracks:
    satellites, epochs = np.shape(azimuth_deg)
    return SkyTracks(
        satellite=tuple(f"GPS {row}" for row in range(satellites)),
        system=("GPS",) * satellites,
        orbit_class=("MEO",) * satellites,
        radius_m=np.full(satellites, 26_559_700.0),
        time_s=60.0 * np.arange(float(epochs)),
        azimuth_deg=np.array(azimuth_deg),
        elevation_deg=np.array(elevation_deg),
        range_m=np.full((satellites, epochs), 2e7),
        own_epochs=np.array(own_epochs),
        joint_epochs=epochs,
    )


def test_cells_hold_the_time_counted_by_hand() -> None:
    # Two satellites; the first is counted over four epochs, one of them below the horizon, the second over
    # two.
    tracks = tracks_of(
        [[5.0, 5.0, 355.0, 100.0], [15.0, 359.99, 0.0, 0.0]],
        [[12.0, 19.9, 90.0, -0.1], [10.0, 0.0, 0.0, 0.0]],
        [4, 2],
    )
    density = sky_density(tracks, np.array([True, True]), cell_deg=10.0)
    assert density.mean_satellites.shape == (36, 9)
    assert density.azimuth_edges_deg.tolist() == list(range(0, 370, 10))
    assert density.elevation_edges_deg.tolist() == list(range(0, 100, 10))
    expected = np.zeros((36, 9))
    expected[0, 1] = 2 / 4
    expected[35, 8] = 1 / 4  # the zenith belongs to the highest cell
    expected[1, 1] = 1 / 2
    expected[35, 0] = 1 / 2  # the horizon belongs to the lowest
    np.testing.assert_array_equal(density.mean_satellites, expected)


def test_only_the_chosen_satellites_count() -> None:
    tracks = tracks_of([[5.0], [15.0]], [[12.0], [10.0]], [1, 1])
    assert sky_density(tracks, np.array([False, True])).mean_satellites.sum() == 1.0
    assert sky_density(tracks, np.array([False, False])).mean_satellites.sum() == 0.0


@pytest.mark.parametrize("latitude_deg", [-90.0, -35.0, 0.0, 57.0, 90.0])
def test_sum_over_the_sky_is_the_mean_number_above_the_horizon(latitude_deg: float) -> None:
    tracks = sky_tracks(
        nominal_orbits(["GPS", "BeiDou"], START), Point(latitude_deg, 20.0, 0.0), days=1.0, step_s=600.0
    )
    chosen = np.array(tracks.system) == "BeiDou"
    above = [
        np.mean(tracks.elevation_deg[row, : tracks.own_epochs[row]] >= 0.0) for row in np.flatnonzero(chosen)
    ]
    density = sky_density(tracks, chosen, cell_deg=1.0)
    assert density.mean_satellites.sum() == pytest.approx(sum(above))


def test_no_gps_satellite_stands_in_the_hole_around_the_pole() -> None:
    # Authority: the geometry of an inclination of 55 degrees: from 57 N no satellite comes as far north as
    # the celestial pole, so the sky due north at 57 degrees of elevation stays empty while the south is full.
    tracks = sky_tracks(nominal_orbits(["GPS"], START), Point(57.0, -2.0, 0.0), days=10.0, step_s=120.0)
    density = sky_density(tracks, np.ones(27, dtype=bool), cell_deg=5.0).mean_satellites
    hole = density[[-1, 0], 8:13]  # azimuth 355 to 5, elevation 40 to 65
    assert hole.sum() == 0.0
    assert density[35:37, 8:13].sum() > 0.01  # the same cells in the south
