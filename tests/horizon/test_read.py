from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest

from siteassess.errors import InputError
from siteassess.horizon.read import read_skyline
from siteassess.horizon.view import hiding_obstacle, is_unsurveyed
from siteassess.site_file.read import read_site

WriteSite = Callable[..., Path]
SECOND = '[[horizon]]\nsource = "survey"\nfile = "second.csv"\n'


def test_a_level_horizon_is_all_surveyed(write_site: WriteSite) -> None:
    skyline = read_skyline(read_site(write_site()))
    assert skyline.unsurveyed_deg.shape == (0, 2)
    assert hiding_obstacle(skyline, 10.0, -1.0) == 0
    assert hiding_obstacle(skyline, 10.0, 1.0) == -1


def test_without_a_horizon_the_whole_sky_is_unsurveyed(write_site: WriteSite) -> None:
    block = '[[horizon]]\nsource = "survey"\nfile = "horizon.csv"\ncomplete = true\n'
    skyline = read_skyline(read_site(write_site((block, ""))))
    assert skyline.unsurveyed_deg.tolist() == [[0.0, 360.0]]
    assert skyline.obstacles == ()
    assert is_unsurveyed(skyline, [0, 200, 360], [1, 50, 90]).all()


def test_an_azimuth_is_unsurveyed_where_no_file_shows_it(write_site: WriteSite) -> None:
    # By hand: the first file shows 340..20, the second 10..60; known walls hide what they hide.
    path = write_site(
        ("complete = true", "complete = false"),
        horizon="azimuth_deg,elevation_deg\n0,5\n20,5\n340,5\n",
        extra="\n" + SECOND,
    )
    second = "azimuth_deg,elevation_deg,obstacle\n10,8,\n40,8,\n60,8,\n100,30,hall\n120,30,hall\n"
    (path.parent / "second.csv").write_text(second)
    skyline = read_skyline(read_site(path))
    np.testing.assert_allclose(skyline.unsurveyed_deg, [[60.0, 340.0]])
    assert [one.name for one in skyline.obstacles] == ["general skyline", "general skyline", "hall"]
    assert [one.source for one in skyline.obstacles] == ["horizon.csv", "second.csv", "second.csv"]
    seen = is_unsurveyed(skyline, [350, 50, 70, 110, 110], [10, 10, 10, 20, 40])
    assert seen.tolist() == [False, False, True, False, True]
    assert hiding_obstacle(skyline, [15, 5, 110], [7, 4, 20]).tolist() == [1, 0, 2]


def test_mistakes_of_all_files_come_together(write_site: WriteSite) -> None:
    path = write_site(horizon="azimuth_deg,elevation_deg\n0,99\n", extra="\n" + SECOND)
    with pytest.raises(InputError) as refusal:
        read_skyline(read_site(path))
    first, second = str(refusal.value).splitlines()
    assert first == "horizon.csv: line 2, elevation_deg is 99; it must lie from -5 to 90"
    assert second == f"second.csv: there is no such file; it was looked for as {path.parent / 'second.csv'}"
