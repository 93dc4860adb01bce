"""Pattern files: what they become, and what is refused in which words."""

from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest

from siteassess.antenna.energy import efficiency
from siteassess.antenna.gain import cross_gain_dbic, gain_dbic
from siteassess.antenna.pattern_file import read_pattern_file
from siteassess.errors import InputError

L1_HZ, L5_HZ = 1575.42e6, 1176.45e6
MILLI_DB = 0.001

PLAIN = """elevation_deg,gain_dbic
-90,-25
-60,-20
-30,-14
0,-5
30,1
60,4
90,5.5
"""


@pytest.fixture
def write(tmp_path: Path) -> Callable[[str], Path]:
    def write_text(text: str) -> Path:
        path = tmp_path / "roof.csv"
        path.write_text(text, encoding="utf-8")
        return path

    return write_text


def grid_text(
    azimuths: list[float], columns: str = "azimuth_deg,elevation_deg,gain_dbic", tail: str = ""
) -> str:
    rows = [
        f"{azimuth},{elevation},{elevation / 18.0 - 6.0 + 0.01 * azimuth * (abs(elevation) < 90)}{tail}"
        for azimuth in azimuths
        for elevation in range(-90, 91, 30)
    ]
    return "\n".join([columns, *rows, ""])


def test_plain_file(write: Callable[[str], Path]) -> None:
    pattern = read_pattern_file(write(PLAIN))
    assert pattern.name == "roof.csv"
    assert pattern.rests_on == "the file roof.csv"
    assert pattern.cross_gain_dbic is None
    assert gain_dbic(pattern, 200.0, [-90.0, 15.0, 90.0], L1_HZ) == pytest.approx([-25.0, -2.0, 5.5])


def test_semicolons_and_decimal_commas_read_the_same(write: Callable[[str], Path]) -> None:
    german = PLAIN.replace(",", ";").replace("5.5", "5,5")
    assert gain_dbic(read_pattern_file(write(german)), 0.0, 90.0, L1_HZ) == 5.5


@pytest.mark.parametrize(
    "azimuths",
    [[0.0, 90.0, 180.0, 270.0], [90.0, 180.0, 270.0, 360.0], [45.0, 135.0, 225.0, 315.0]],
    ids=["from north", "to north", "beside north"],
)
def test_grid_is_closed_through_north(write: Callable[[str], Path], azimuths: list[float]) -> None:
    pattern = read_pattern_file(write(grid_text(azimuths)))
    assert pattern.azimuth_deg[[0, -1]].tolist() == [0.0, 360.0]
    assert pattern.gain_dbic[:, 0].tolist() == pattern.gain_dbic[:, -1].tolist()
    at_rows = gain_dbic(pattern, np.array(azimuths), 0.0, L1_HZ)
    assert at_rows == pytest.approx(-6.0 + 0.01 * np.array(azimuths), abs=MILLI_DB)


def test_north_lies_between_its_neighbours(write: Callable[[str], Path]) -> None:
    pattern = read_pattern_file(write(grid_text([30.0, 140.0, 250.0, 320.0])))
    # From 320 (-2.8 dBic) to 30 (-5.7 dBic) north is 40 of 70 degrees on the way.
    assert gain_dbic(pattern, 0.0, 0.0, L1_HZ) == pytest.approx(-2.8 - 2.9 * 40.0 / 70.0, abs=MILLI_DB)


def test_carriers_are_told_apart(write: Callable[[str], Path]) -> None:
    rows = PLAIN.splitlines()[1:]
    text = "carrier_hz,elevation_deg,gain_dbic,cross_gain_dbic\n"
    text += "".join(f"{L1_HZ},{row},-20\n" for row in rows)
    text += "".join(f"{L5_HZ},{row.split(',')[0]},{float(row.split(',')[1]) - 1},-17\n" for row in rows)
    pattern = read_pattern_file(write(text))
    assert pattern.carrier_hz.tolist() == [L5_HZ, L1_HZ]
    assert gain_dbic(pattern, 0.0, 90.0, L5_HZ) == pytest.approx(4.5)
    assert cross_gain_dbic(pattern, 0.0, 90.0, L5_HZ) == pytest.approx(-17.0)
    assert gain_dbic(pattern, 0.0, 90.0, L1_HZ) == pytest.approx(5.5)
    assert pattern.remarks == ()


def test_row_order_of_azimuths_and_carriers_is_free(write: Callable[[str], Path]) -> None:
    forward = read_pattern_file(write(grid_text([0.0, 90.0, 180.0, 270.0])))
    backward = read_pattern_file(write(grid_text([270.0, 90.0, 180.0, 0.0])))
    assert forward.gain_dbic.tolist() == backward.gain_dbic.tolist()


def test_pattern_that_ends_at_the_horizon_falls_below(write: Callable[[str], Path]) -> None:
    pattern = read_pattern_file(write("elevation_deg,gain_dbic\n0,-5\n30,1\n60,4\n90,5.5\n"))
    assert gain_dbic(pattern, 0.0, [0.0, -45.0, -90.0], L1_HZ) == pytest.approx([-5.0, -15.0, -25.0])
    share = efficiency(pattern, L1_HZ)
    assert pattern.remarks == (
        "The pattern ends at elevation 0; below, the gain is assumed to fall by 20 dB in 90 degrees.",
        f"The pattern names no cross-polar gain: {1 - share:.0%} of the power is loss or cross-polar,"
        " unknown, and its noise is taken at 290 K.",
    )


def test_pattern_that_ends_below_the_horizon_goes_on_from_there(write: Callable[[str], Path]) -> None:
    pattern = read_pattern_file(write("elevation_deg,gain_dbic\n-30,-14\n0,-5\n30,1\n60,4\n90,5.5\n"))
    assert gain_dbic(pattern, 0.0, -90.0, L1_HZ) == pytest.approx(-14.0 - 20.0 * 60.0 / 90.0)


def even(level_dbic: float, cross: str = "") -> str:
    header = "elevation_deg,gain_dbic,cross_gain_dbic" if cross else "elevation_deg,gain_dbic"
    return "\n".join([header, *[f"{elevation},{level_dbic}{cross}" for elevation in range(-90, 91, 30)], ""])


def test_lossless_pattern_earns_no_remark(write: Callable[[str], Path]) -> None:
    assert read_pattern_file(write(even(0.0))).remarks == ()


def test_gain_a_little_too_high_earns_a_remark(write: Callable[[str], Path]) -> None:
    assert read_pattern_file(write(even(0.3))).remarks == (
        "The pattern's mean over the sphere is 0.30 dB; more than 0 dB is more power than the antenna is fed,"
        " so its gains are probably that much too high.",
    )


def test_gain_much_too_high_is_refused(write: Callable[[str], Path]) -> None:
    assert read_pattern_file(write(even(0.49)))
    assert messages(write(even(0.6))) == [
        "roof.csv: gain_dbic has a mean of 0.60 dB over the sphere; it must be at most 0.49 dB, because no"
        " antenna sends out more power than it is fed"
    ]


def test_cross_polar_power_counts_and_the_carrier_is_named(write: Callable[[str], Path]) -> None:
    text = even(0.0, ",-6,1575.42e6").replace("cross_gain_dbic", "cross_gain_dbic,carrier_hz")
    assert messages(write(text)) == [
        "roof.csv: gain_dbic plus its cross-polar part has a mean of 0.97 dB over the sphere at 1575.42 MHz;"
        " it must be at most 0.49 dB, because no antenna sends out more power than it is fed"
    ]


def messages(path: Path) -> list[str]:
    with pytest.raises(InputError) as refused:
        read_pattern_file(path)
    return [str(mistake) for mistake in refused.value.mistakes]


GRID = grid_text([0.0, 90.0, 180.0, 270.0])

REFUSED = {
    "cross-polar gain given twice": (
        "elevation_deg,gain_dbic,cross_gain_dbic,axial_ratio_db\n0,0,-20,1\n",
        [
            "roof.csv: has both cross_gain_dbic and axial_ratio_db; they say the same thing twice: keep one",
        ],
    ),
    "axial ratio below 0": (
        "elevation_deg,gain_dbic,axial_ratio_db\n0,0,-1\n",
        ["roof.csv: line 2, axial_ratio_db is -1; it must lie from 0 to 100"],
    ),
    "cuts that do not meet at the zenith": (
        grid_text([0.0, 90.0, 180.0, 270.0]).replace("270.0,90,-1.0", "270.0,90,1.0"),
        [
            "roof.csv: gain_dbic differs by up to 2.00 dB between azimuths at elevation 90; they are one"
            " direction and must agree within 1 dB"
        ],
    ),
    "ratios instead of decibels": (
        "elevation_deg,gain_dbic\n-90,0.01\n-60,0.02\n-30,0.05\n0,0.3\n30,1.6\n60,3\n90,4\n",
        [
            "roof.csv: gain_dbic has a mean of 1.06 dB over the sphere; it must be at most 0.49 dB, because"
            " no antenna sends out more power than it is fed (no gain is below 0: they may be ratios instead"
            " of decibels)"
        ],
    ),
    "dipole counted twice": (
        even(2.15),
        [
            "roof.csv: gain_dbic has a mean of 2.15 dB over the sphere; it must be at most 0.49 dB, because"
            " no antenna sends out more power than it is fed (the 2.15 dB from dBd to dBi may have been added"
            " once too often)"
        ],
    ),
    "circular counted twice": (
        even(3.0),
        [
            "roof.csv: gain_dbic has a mean of 3.00 dB over the sphere; it must be at most 0.49 dB, because"
            " no antenna sends out more power than it is fed (the 3 dB from linear to circular may have been"
            " added once too often)"
        ],
    ),
    "no gain": (
        "elevation_deg,power\n0,1\n",
        [
            "roof.csv: line 1, power is no column of this table; its columns are carrier_hz, azimuth_deg,"
            " elevation_deg, gain_dbic, cross_gain_dbic and axial_ratio_db",
            "roof.csv: line 1 names no column gain_dbic; the table needs it",
        ],
    ),
    "no elevation": (
        "gain_dbic\n0\n",
        ["roof.csv: line 1 names no column elevation_deg; the table needs it"],
    ),
    "elevation too high": (
        PLAIN.replace("90,5.5", "95,5.5"),
        ["roof.csv: line 8, elevation_deg is 95; it must lie from -90 to 90"],
    ),
    "gain too high": (
        PLAIN.replace("60,4", "60,400"),
        ["roof.csv: line 7, gain_dbic is 400; it must lie from -100 to 40"],
    ),
    "azimuth beyond the circle": (
        GRID.replace("270.0,30", "-90.0,30"),
        ["roof.csv: line 27, azimuth_deg is -90; it must lie from 0 to 360"],
    ),
    "cross-polar gain too low": (
        even(-1.0, ",-101"),
        [
            f"roof.csv: line {line}, cross_gain_dbic is -101; it must lie from -100 to 40"
            for line in range(2, 9)
        ],
    ),
    "carrier in MHz": (
        "carrier_hz,elevation_deg,gain_dbic\n1575.42,0,1\n",
        ["roof.csv: line 2, carrier_hz is 1575.42; it must lie from 100000000 to 100000000000"],
    ),
    "blank elevation and gain": (
        "elevation_deg,gain_dbic\n,1\n0,\n",
        [
            "roof.csv: line 2, elevation_deg is blank; it must be a number",
            "roof.csv: line 3, gain_dbic is blank; it must be a number",
        ],
    ),
    "blank cross-polar gain": (
        "elevation_deg,gain_dbic,cross_gain_dbic\n0,1,\n90,2,-20\n",
        ["roof.csv: line 2, cross_gain_dbic is blank; fill every row, or leave the column out"],
    ),
    "word for a number": (
        "elevation_deg,gain_dbic,cross_gain_dbic\n0,1,low\n90,2,-20\n",
        ['roof.csv: line 2, cross_gain_dbic is "low"; it must be a number'],
    ),
    "slip of the pen": (
        PLAIN.replace("-30,-14", "-3,-14").replace("0,-5", "-5,-5", 1),
        [
            "roof.csv: line 5, elevation_deg is -5; it must be above -3, that of line 4: rows ascend"
            " in elevation"
        ],
    ),
    "row given twice": (
        PLAIN.replace("30,1\n", "30,1\n30,1\n"),
        [
            "roof.csv: line 7, elevation_deg is 30; it must be above 30, that of line 6: rows ascend"
            " in elevation"
        ],
    ),
    "cut given twice": (
        grid_text([0.0, 90.0, 180.0, 270.0, 90.0]),
        [
            "roof.csv: line 30, elevation_deg is -90; it must be above 90, that of line 15: rows ascend in"
            " elevation within one azimuth_deg"
        ],
    ),
    "one direction missing": (
        GRID.replace("90.0,30,-3.433333333333333\n", ""),
        [
            "roof.csv: there is no row for azimuth_deg 90, elevation_deg 30; the grid of directions"
            " must be full"
        ],
    ),
    "an odd elevation": (
        GRID.replace("\n180.0,30", "\n180.0,33"),
        [
            "roof.csv: there is no row for azimuth_deg 0, elevation_deg 33, nor for 3 more directions;"
            " the grid of directions must be full"
        ],
    ),
    "begins above the horizon": (
        "elevation_deg,gain_dbic\n10,1\n40,3\n70,4\n90,5\n",
        ["roof.csv: elevation_deg starts at 10; it must reach down to 0 at least"],
    ),
    "ends below the zenith": (
        "elevation_deg,gain_dbic\n0,1\n30,3\n60,4\n85,5\n",
        ["roof.csv: elevation_deg ends at 85; it must reach 90"],
    ),
    "too few rows": (
        "elevation_deg,gain_dbic\n0,-3\n90,4\n",
        [
            "roof.csv: elevation_deg leaves out 0 to 90; neighbouring elevations must lie at most 30 apart",
        ],
    ),
    "one row": (
        "elevation_deg,gain_dbic\n45,4\n",
        [
            "roof.csv: elevation_deg starts at 45; it must reach down to 0 at least",
            "roof.csv: elevation_deg ends at 45; it must reach 90",
        ],
    ),
    "half a turn": (
        grid_text([0.0, 90.0, 180.0]),
        ["roof.csv: azimuth_deg leaves out 180 to 0; neighbouring azimuths must lie at most 120 apart"],
    ),
    "one cut": (
        grid_text([45.0]),
        ["roof.csv: azimuth_deg leaves out 45 to 45; neighbouring azimuths must lie at most 120 apart"],
    ),
    "open seam": (
        grid_text([0.0, 90.0, 180.0, 270.0, 360.0]),
        [
            "roof.csv: gain_dbic differs by up to 3.60 dB between azimuths 0 and 360; they are one direction"
            " and must agree"
        ],
    ),
}


@pytest.mark.parametrize(("text", "expected"), REFUSED.values(), ids=REFUSED.keys())
def test_refused_with_one_clear_message(write: Callable[[str], Path], text: str, expected: list[str]) -> None:
    assert messages(write(text)) == expected


def test_axial_ratio_says_how_much_is_cross_polar(write: Callable[[str], Path]) -> None:
    # Authority: definition of the axial ratio, (co + cross) / (co - cross) of the fields; 3 dB are 1.4125,
    # a cross-polar field of 0.1710 and -15.34 dB.
    text = "elevation_deg,gain_dbic,axial_ratio_db\n"
    text += "".join(
        f"{elevation},-1,{ratio}\n"
        for elevation, ratio in zip(range(-90, 91, 30), [3] * 6 + [0], strict=True)
    )
    pattern = read_pattern_file(write(text))
    assert cross_gain_dbic(pattern, 0.0, [0.0, 90.0], L1_HZ) == pytest.approx([-16.34, -61.0], abs=0.01)


def test_cuts_that_nearly_meet_are_averaged_at_the_poles(write: Callable[[str], Path]) -> None:
    text = GRID.replace("270.0,90,-1.0", "270.0,90,-0.4").replace("90.0,-90,-11.0", "90.0,-90,-19.0")
    pattern = read_pattern_file(write(text))
    zenith_dbic = gain_dbic(pattern, np.arange(0.0, 360.0, 7.0), 90.0, L1_HZ)
    # As ratios: (3 x 0.7943 + 0.9120) / 4 = 0.8238 or -0.842 dB.
    assert zenith_dbic == pytest.approx(np.full(zenith_dbic.size, -0.842), abs=MILLI_DB)
    assert "The pattern's cuts differ by up to 0.60 dB at the zenith, which is one direction; their mean" in (
        " ".join(pattern.remarks)
    )
    assert "differ by up to 8.00 dB at the nadir" in " ".join(pattern.remarks)


def test_gain_goes_on_evenly_below_a_file_of_even_steps(write: Callable[[str], Path]) -> None:
    # The same straight line in dB, on an axis that can be read without searching.
    rows = "".join(f"{elevation},{elevation / 10 - 6}\n" for elevation in range(0, 91, 2))
    pattern = read_pattern_file(write("elevation_deg,gain_dbic\n" + rows))
    assert np.diff(pattern.elevation_deg).tolist() == [2.0] * 90
    assert gain_dbic(pattern, 0.0, [-2.0, -45.0, -90.0], L1_HZ) == pytest.approx(
        [-6.444, -16.0, -26.0], abs=0.001
    )


@pytest.mark.parametrize(
    ("text", "remark"),
    [
        (
            even(-3.0).replace("90,-3.0", "90,-2.0"),
            "so little power is rare; gains in dBd would be 2.15 dB lower than in dBic.",
        ),
        (
            "elevation_deg,gain_dbic\n-90,-20\n-60,-20\n-30,-15\n0,-10\n30,-5\n60,-2\n90,0\n",
            "the highest gain is 0, as in a pattern relative to its peak, which gives no gain.",
        ),
    ],
    ids=["dBd", "relative to the peak"],
)
def test_gain_that_is_too_low_earns_a_suspicion(write: Callable[[str], Path], text: str, remark: str) -> None:
    pattern = read_pattern_file(write(text))
    share_db = 10.0 * np.log10(efficiency(pattern, L1_HZ))
    assert pattern.remarks[0] == f"The pattern's mean over the sphere is {share_db:.2f} dB: {remark}"
