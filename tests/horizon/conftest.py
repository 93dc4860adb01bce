"""Builders of obstacles, skylines and surveys for the tests of the horizon."""

from collections.abc import Callable, Sequence
from pathlib import Path

import numpy as np
import pytest

from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.survey.bearings import NorthTurn
from siteassess.horizon.survey.read import NORTH_AS_READ, Survey, read_survey
from siteassess.site_file.model import HorizonSource, Mount


@pytest.fixture
def obstacle() -> Callable[..., Obstacle]:
    def build(azimuth_deg: Sequence[float], elevation_deg: Sequence[float], **more: object) -> Obstacle:
        arrays = {
            key: np.array(value, dtype=float) if isinstance(value, list) else value
            for key, value in more.items()
        }
        return Obstacle(
            **{"name": "thing", "cover": "solid"} | arrays,
            azimuth_deg=np.array(azimuth_deg, dtype=float),
            elevation_deg=np.array(elevation_deg, dtype=float),
        )

    return build


@pytest.fixture
def skyline() -> Callable[..., Skyline]:
    def build(*obstacles: Obstacle, gaps_deg: Sequence[tuple[float, float]] = ()) -> Skyline:
        return Skyline(
            obstacles=obstacles,
            outline=upper_envelope(obstacles),
            unsurveyed_deg=np.array(gaps_deg, dtype=float).reshape(-1, 2),
        )

    return build


@pytest.fixture
def survey(tmp_path: Path) -> Callable[..., Survey]:
    """Reads the text of a survey; the antenna stands 1.5 m above the mark."""

    def read(text: str, *, turn: NorthTurn = NORTH_AS_READ, years: float = 0.0, **block: object) -> Survey:
        path = tmp_path / "horizon.csv"
        path.write_text(text, encoding="utf-8")
        source = HorizonSource(source="survey", file=path.name, **block)
        return read_survey(path, source, Mount(mast_height_m=1.5), turn=turn, years=years)

    return read
