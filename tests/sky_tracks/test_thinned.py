"""The thinned sky keeps satellite-time, directions and spread: sums and means of the tracks themselves."""

from datetime import datetime

import numpy as np
import pytest

from siteassess.orbits.constellations import nominal_orbits
from siteassess.site_file.model import Position
from siteassess.sky_tracks.thinned import ThinnedSky, thinned_sky
from siteassess.sky_tracks.tracks import SkyTracks, sky_tracks

EDGES_DEG = np.arange(0.0, 91.0, 2.0)
ROUNDING = 1e-9


@pytest.fixture(scope="module")
def tracks() -> SkyTracks:
    orbits = nominal_orbits(("GPS", "BeiDou"), datetime(2026, 1, 1))
    place = Position(latitude_deg=48.0, longitude_deg=11.0, height_m=600.0)
    return sky_tracks(orbits, place, days=1, step_s=300)


@pytest.fixture(scope="module")
def sky(tracks: SkyTracks) -> ThinnedSky:
    return thinned_sky(tracks, EDGES_DEG, np.full(len(EDGES_DEG) - 1, 4.0))


def test_no_satellite_time_is_lost(tracks: SkyTracks, sky: ThinnedSky) -> None:
    above = sum(
        float((tracks.elevation_deg[index, :epochs] >= 0.0).mean())
        for index, epochs in enumerate(tracks.own_epochs.tolist())
    )
    assert sky.weight.sum() == pytest.approx(above, rel=ROUNDING)


def test_mean_direction_and_spread_are_those_of_the_positions(tracks: SkyTracks, sky: ThinnedSky) -> None:
    epochs = tracks.own_epochs.tolist()
    elevation_deg = np.concatenate([tracks.elevation_deg[index, :n] for index, n in enumerate(epochs)])
    weight = np.concatenate([np.full(n, 1.0 / n) for n in epochs]) * (elevation_deg >= 0.0)
    mean_square = np.sum(weight * elevation_deg**2) / weight.sum()
    assert np.average(sky.elevation_deg, weights=sky.weight) == pytest.approx(
        np.sum(weight * elevation_deg) / weight.sum()
    )
    # Steiner: within cells and between cells together.
    assert np.average(sky.spread_deg**2 + sky.elevation_deg**2, weights=sky.weight) == pytest.approx(
        mean_square
    )


def test_directions_lie_in_their_cells(sky: ThinnedSky) -> None:
    ring = np.searchsorted(EDGES_DEG, sky.elevation_deg, side="right") - 1
    cells = np.stack([sky.group, ring, (sky.azimuth_deg / 4.0).astype(int)])
    assert np.unique(cells, axis=1).shape[1] == len(sky.weight)
    assert (sky.spread_deg <= 1.0).all()  # half of the height of a cell


def test_groups_are_systems_and_orbit_classes(sky: ThinnedSky) -> None:
    names = set(zip(sky.system, sky.orbit_class, strict=True))
    assert names == {("GPS", "MEO"), ("BeiDou", "MEO"), ("BeiDou", "IGSO"), ("BeiDou", "GEO")}
    assert (np.diff(sky.group) >= 0).all()
