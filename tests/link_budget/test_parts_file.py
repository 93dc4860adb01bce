"""A parts table of the user's own: what it gives, and what a wrong one is told, word for word."""

from pathlib import Path

import pytest

from siteassess.errors import InputError
from siteassess.link_budget.chain.parts_file import read_parts_file

GOOD = """\
kind,carrier_mhz,k1_db_per_100m,k2_db_per_100m,ohm_per_100m,loss_db,gain_db,noise_figure_db,passes_supply,source
thick cable,,0.3,0.0005,0.8,,,,,data sheet of 2025
amplifier,1176.45,,,,,33,1.4,,
amplifier,1575.42,,,,,36,1.8,,
stop,,,,,0.4,,,no,
"""


def written(folder: Path, text: str) -> Path:
    path = folder / "parts.csv"
    path.write_text(text, encoding="utf-8")
    return path


def test_kinds_of_a_table(tmp_path: Path) -> None:
    kinds = read_parts_file(written(tmp_path, GOOD))
    assert list(kinds) == ["thick cable", "amplifier", "stop"]
    cable = kinds["thick cable"]
    assert (cable.k1_db_per_100m, cable.k2_db_per_100m, cable.ohm_per_100m) == (0.3, 0.0005, 0.8)
    assert cable.rests_on == "parts.csv: data sheet of 2025"
    assert kinds["amplifier"].values == {
        "gain_db": {"1176.45": 33.0, "1575.42": 36.0},
        "noise_figure_db": {"1176.45": 1.4, "1575.42": 1.8},
    }
    assert kinds["amplifier"].rests_on == "the file parts.csv"
    assert kinds["stop"].values == {"loss_db": 0.4}
    assert (kinds["stop"].passes_supply, cable.passes_supply) == (False, True)


def test_semicolons_and_decimal_commas(tmp_path: Path) -> None:
    kinds = read_parts_file(written(tmp_path, "kind;loss_db\nfilter;1,5\n"))
    assert kinds["filter"].values == {"loss_db": 1.5}


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("loss_db\n1\n", "parts.csv: line 1 names no column kind; the table needs it"),
        ("kind,loss_db\n,1\n", "parts.csv: line 2, kind is blank; it must be given"),
        (
            "kind,loss\nfilter,1\n",
            "parts.csv: line 1, loss is no column of this table; did you mean loss_db?",
        ),
        ("kind,loss_db\nfilter,much\n", 'parts.csv: line 2, loss_db is "much"; it must be a number'),
        ("kind,loss_db\nfilter,-1\n", "parts.csv: line 2, loss_db is -1; it must lie from 0 to 100"),
        (
            "kind,loss_db,passes_supply\nfilter,1,maybe\n",
            'parts.csv: line 2, passes_supply is "maybe"; it must be yes or no',
        ),
        (
            "kind,loss_db,gain_db\nfilter,1,2\n",
            "parts.csv: line 2 has loss_db and gain_db; keep one of them",
        ),
        (
            "kind,ohm_per_100m\nfilter,1\n",
            "parts.csv: line 2 has no k1_db_per_100m, loss_db, gain_db or noise_figure_db;"
            " a cable, a lossy part, an amplifier or a receiver has one",
        ),
        (
            "kind,gain_db\namplifier,20\n",
            "parts.csv: line 2, noise_figure_db is blank; a part with gain needs it",
        ),
        (
            "kind,loss_db,noise_figure_db\nfilter,1,1\n",
            "parts.csv: line 2, noise_figure_db is 1; the noise of a lossy part follows from its loss",
        ),
        (
            "kind,loss_db,k2_db_per_100m\nfilter,1,0.5\n",
            "parts.csv: line 2, k2_db_per_100m is 0.5; only a cable, with k1_db_per_100m, has it",
        ),
        (
            "kind,k1_db_per_100m,carrier_mhz\ncable,1,1575.42\n",
            "parts.csv: line 2, carrier_mhz is 1575.42;"
            " the loss of a cable follows from k1_db_per_100m at every carrier",
        ),
        (
            "kind,gain_db,noise_figure_db,min_supply_voltage_v,max_supply_voltage_v\namplifier,20,2,5,3\n",
            "parts.csv: line 2, max_supply_voltage_v is 3; it must be at least min_supply_voltage_v, 5",
        ),
        (
            "kind,loss_db\nfilter,1\nfilter,2\n",
            "parts.csv: line 3, kind stands there twice;"
            " one kind has one row, or several that each name a carrier_mhz",
        ),
        (
            "kind,loss_db,carrier_mhz\nfilter,1,1200\nfilter,2,1200\n",
            "parts.csv: line 3, carrier_mhz stands there twice for this kind; keep one",
        ),
        (
            "kind,loss_db,noise_figure_db,gain_db,carrier_mhz\na,,2,20,1200\na,,2,20,1500\na,2,,,1600\n",
            "parts.csv: line 4, loss_db is not filled as at the other carriers;"
            " every carrier of a kind has the same columns filled\n"
            "parts.csv: line 4, gain_db is not filled as at the other carriers;"
            " every carrier of a kind has the same columns filled\n"
            "parts.csv: line 4, noise_figure_db is not filled as at the other carriers;"
            " every carrier of a kind has the same columns filled",
        ),
        (
            f"kind,loss_db\n{'x' * 201},1\n",
            f'parts.csv: line 2, kind is "{"x" * 57}..."; it must have at most 200 characters',
        ),
    ],
)
def test_one_mistake_has_one_message(tmp_path: Path, text: str, message: str) -> None:
    with pytest.raises(InputError) as caught:
        read_parts_file(written(tmp_path, text))
    assert str(caught.value) == message
