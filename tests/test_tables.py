"""Reading CSV tables, the package's and the user's; every message word for word."""

import csv
import io
from pathlib import Path

import numpy as np
import pytest
from hypothesis import HealthCheck, example, given, settings
from hypothesis import strategies as st

from siteassess.errors import InputError
from siteassess.tables import (
    MOST_MISTAKES,
    UserTable,
    packaged_columns,
    packaged_header,
    packaged_rows,
    read_user_table,
)

COLUMNS = "its columns are azimuth_deg, elevation_deg, distance_m, obstacle and cover"
NOT_UTF8 = "is not UTF-8; save the file in the encoding UTF-8"
PLAIN = "azimuth_deg,elevation_deg,obstacle\n0,1.5,Crane\n90,-2,\n"


def written(folder: Path, text: str | bytes) -> Path:
    path = folder / "horizon.csv"
    path.write_bytes(text if isinstance(text, bytes) else text.encode())
    return path


def table_of(path: Path) -> UserTable:
    return read_user_table(
        path,
        numbers=("azimuth_deg", "elevation_deg", "distance_m"),
        texts=("obstacle", "cover"),
        required=("azimuth_deg", "elevation_deg"),
    )


def refusal(folder: Path, text: str | bytes) -> str:
    with pytest.raises(InputError) as caught:
        table_of(written(folder, text))
    return str(caught.value)


def test_packaged_rows_are_texts_and_blank_cells_are_empty() -> None:
    row = next(row for row in packaged_rows("link_budget/power/signals.csv") if row["signal"] == "BeiDou B1C")
    assert (row["carrier_hz"], row["geo_dbw"], row["status"]) == ("1575420000", "", "seen")


def test_packaged_columns_are_numbers_that_nobody_can_change(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    (tmp_path / "beam.csv").write_text("# source: a test\nangle_deg,gain_db\n0,1.5\n10,\n", encoding="utf-8")
    monkeypatch.setattr("siteassess.tables.resources.files", lambda package: tmp_path)
    columns = packaged_columns("beam.csv")
    assert columns["angle_deg"].tolist() == [0.0, 10.0]
    assert columns["gain_db"][0] == 1.5
    assert np.isnan(columns["gain_db"][1])
    with pytest.raises(ValueError, match="read-only"):
        columns["angle_deg"][0] = 1.0


def test_packaged_header_joins_lines_without_a_key(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    text = "# source: Handbook, Table 2,\n#   second row\n# status: seen\nangle_deg\n# no: header\n"
    (tmp_path / "beam.csv").write_text(text, encoding="utf-8")
    monkeypatch.setattr("siteassess.tables.resources.files", lambda package: tmp_path)
    assert packaged_header("beam.csv") == {"source": "Handbook, Table 2, second row", "status": "seen"}


@pytest.mark.parametrize(
    ("text", "line"),
    [
        (PLAIN, [2, 3]),
        ("\ufeff" + PLAIN, [2, 3]),
        (PLAIN.replace("\n", "\r\n"), [2, 3]),
        (PLAIN.replace("\n", "\r"), [2, 3]),
        (PLAIN.replace("\n", "\n\n"), [3, 5]),
        (PLAIN.replace(",", " , "), [2, 3]),
        ("azimuth_deg;elevation_deg;obstacle\n0;1,5;Crane\n90;-2;\n", [2, 3]),
        (PLAIN.replace(",", ";"), [2, 3]),
        ("# crew 2\n\n" + PLAIN, [4, 5]),
        ("azimuth_deg,elevation_deg,obstacle,,\n0,1.5,Crane,,\n,,,,\n90,-2,\n", [2, 4]),
        ('azimuth_deg,elevation_deg,"obstacle"\n0,1.5, "Crane"\n90,-2\n', [2, 3]),
        (PLAIN.rstrip("\n"), [2, 3]),
    ],
)
def test_one_table_in_all_its_dresses(tmp_path: Path, text: str, line: list[int]) -> None:
    table = table_of(written(tmp_path, text))
    assert table.file == "horizon.csv"
    assert table.line.tolist() == line
    assert {name: values.tolist() for name, values in table.numbers.items()} == {
        "azimuth_deg": [0.0, 90.0],
        "elevation_deg": [1.5, -2.0],
    }
    assert table.texts == {"obstacle": ("Crane", None)}
    assert table.mistakes == ()


def test_quoted_cell_over_two_lines_counts_from_its_first(tmp_path: Path) -> None:
    text = 'azimuth_deg,elevation_deg,obstacle\n0,1,"Crane,\nlarge"\n9,x,\n'
    table = table_of(written(tmp_path, text))
    assert table.line.tolist() == [2, 4]
    assert table.texts["obstacle"] == ("Crane,\nlarge", None)
    assert [mistake.where for mistake in table.mistakes] == ["line 4, elevation_deg"]


def test_blank_number_is_nan_where_it_is_not_required(tmp_path: Path) -> None:
    table = table_of(written(tmp_path, "azimuth_deg,elevation_deg,distance_m\n0,1,\n1,2,40\n"))
    assert np.array_equal(table.numbers["distance_m"], [np.nan, 40.0], equal_nan=True)
    assert table.mistakes == ()


def test_arrays_cannot_be_changed(tmp_path: Path) -> None:
    table = table_of(written(tmp_path, PLAIN))
    for array in (table.line, table.numbers["azimuth_deg"]):
        with pytest.raises(ValueError, match="read-only"):
            array[0] = 1


@pytest.mark.parametrize(
    ("rows", "message"),
    [
        ("0,abc,,,\n", 'line 2, elevation_deg is "abc"; it must be a number'),
        ("0,1 deg,,,\n", 'line 2, elevation_deg is "1 deg"; it must be a number'),
        ("0,1_0,,,\n", 'line 2, elevation_deg is "1_0"; it must be a number'),
        ("0,nan,,,\n", 'line 2, elevation_deg is "nan"; it must be a number'),
        ("0,-inf,,,\n", 'line 2, elevation_deg is "-inf"; it must be a number'),
        ("0,1e999,,,\n", 'line 2, elevation_deg is "1e999"; it must be a number'),
        ("0,,,,\n", "line 2, elevation_deg is blank; it must be a number"),
        ("0,1,x,,\n", 'line 2, distance_m is "x"; it must be a number'),
        (
            "0,1,,,,2\n",
            "line 2 has 6 cells;"
            " the header names 5 (if the numbers have decimal commas, separate the cells by semicolons)",
        ),
    ],
)
def test_mistake_in_a_cell(tmp_path: Path, rows: str, message: str) -> None:
    text = "azimuth_deg,elevation_deg,distance_m,obstacle,cover\n" + rows
    (mistake,) = table_of(written(tmp_path, text)).mistakes
    assert str(mistake) == f"horizon.csv: {message}"


def test_cells_too_many_between_semicolons(tmp_path: Path) -> None:
    (mistake,) = table_of(written(tmp_path, "azimuth_deg;elevation_deg\n0;1;5\n")).mistakes
    assert str(mistake) == "horizon.csv: line 2 has 3 cells; the header names 2"


def test_blank_text_that_is_required(tmp_path: Path) -> None:
    path = written(tmp_path, "obstacle,cover\nCrane,\n,solid\n")
    table = read_user_table(path, numbers=(), texts=("obstacle", "cover"), required=("obstacle",))
    assert [str(mistake) for mistake in table.mistakes] == [
        "horizon.csv: line 3, obstacle is blank; it must be given"
    ]


def test_mistakes_come_in_the_order_of_the_file_with_their_values(tmp_path: Path) -> None:
    table = table_of(written(tmp_path, "elevation_deg,azimuth_deg\nx,y\n1,2\nz,3\n"))
    assert [(mistake.where, mistake.value) for mistake in table.mistakes] == [
        ("line 2, elevation_deg", "x"),
        ("line 2, azimuth_deg", "y"),
        ("line 4, elevation_deg", "z"),
    ]
    assert table.numbers["azimuth_deg"].tolist()[1:] == [2.0, 3.0]


def test_a_wrong_column_of_a_long_file_is_not_listed_to_the_end(tmp_path: Path) -> None:
    for further, closing in ((7, "has 7 more mistakes"), (1, "has 1 more mistake")):
        rows = "".join(f"{row},x\n" for row in range(MOST_MISTAKES + further))
        table = table_of(written(tmp_path, "azimuth_deg,elevation_deg\n" + rows))
        assert len(table.mistakes) == MOST_MISTAKES + 1
        assert str(table.mistakes[-1]) == f"horizon.csv: {closing}; the first are listed"


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("", f"is empty; {COLUMNS}"),
        ("\n \n# nothing\n", f"is empty; {COLUMNS}"),
        (",,\n", f"is empty; {COLUMNS}"),
        ("azimuth_deg,elevation_deg\n\n", "has no rows; at least one must follow the names of the columns"),
        ("azimuth_deg\n1\n", "line 1 names no column elevation_deg; the table needs it"),
        ("format = 1\n", f"line 1 names no column of this table; {COLUMNS}"),
        (
            "azimut_deg,elevation_deg\n1,2\n",
            "line 1, azimut_deg is no column of this table; did you mean azimuth_deg?",
        ),
        (
            "azimuth_deg,elevation_deg,qqqq\n1,2,3\n",
            f"line 1, qqqq is no column of this table; {COLUMNS}",
        ),
        ("azimuth_deg,,elevation_deg\n1,2,3\n", f"line 1 has a column without a name; {COLUMNS}"),
        (
            "azimuth_deg,elevation_deg,azimuth_deg\n1,2,3\n",
            "line 1, azimuth_deg stands there twice; keep one",
        ),
        (
            "0,1.5\n90,2\n",
            "line 1 holds numbers;"
            " it must name the columns: azimuth_deg, elevation_deg, distance_m, obstacle and cover",
        ),
        (
            "azimuth_deg\televation_deg\n1\t2\n",
            "line 1 holds tabs; separate the cells by commas, or by semicolons",
        ),
        (
            'azimuth_deg,elevation_deg,obstacle\n1,2,\n3,4,"Crane\n5,6,\n',
            "line 3 cannot be split into cells; check its quotation marks",
        ),
        (
            'azimuth_deg,elevation_deg,obstacle\n1,2,"6" pipe"\n',
            "line 2 cannot be split into cells; check its quotation marks",
        ),
        (PLAIN.replace("Crane", "Caf\u00e9").encode("latin-1"), f"line 2 {NOT_UTF8}"),
        (PLAIN.encode("utf-16"), f"line 1 {NOT_UTF8}"),
    ],
)
def test_table_that_cannot_be_read(tmp_path: Path, text: str | bytes, message: str) -> None:
    assert refusal(tmp_path, text) == f"horizon.csv: {message}"


def test_mistakes_of_the_header_are_gathered(tmp_path: Path) -> None:
    assert refusal(tmp_path, "azimuth_deg,colour,azimuth_deg\n1,2,3\n") == (
        f"horizon.csv: line 1, colour is no column of this table; {COLUMNS}\n"
        "horizon.csv: line 1, azimuth_deg stands there twice; keep one\n"
        "horizon.csv: line 1 names no column elevation_deg; the table needs it"
    )


def test_missing_file(tmp_path: Path) -> None:
    path = tmp_path / "horizon.csv"
    with pytest.raises(InputError) as caught:
        table_of(path)
    assert str(caught.value) == f"horizon.csv: there is no such file; it was looked for as {path}"


def test_folder_in_place_of_a_file(tmp_path: Path) -> None:
    with pytest.raises(InputError) as caught:
        table_of(tmp_path)
    assert str(caught.value) == f"{tmp_path.name}: the file cannot be read; is a directory"


def test_path_with_a_nul_character() -> None:
    with pytest.raises(InputError) as caught:
        table_of(Path("a\0.csv"))
    assert str(caught.value) == "a\0.csv: the file cannot be read; embedded null byte"


FUZZ = settings(
    max_examples=150,
    deadline=None,
    derandomize=True,
    suppress_health_check=[HealthCheck.function_scoped_fixture],
)
NUMBERS = st.floats(allow_nan=False, allow_infinity=False)


@FUZZ
@given(rows=st.lists(st.tuples(NUMBERS, NUMBERS, st.text(st.characters(codec="utf-8"))), min_size=1))
def test_what_a_csv_writer_writes_is_read_back(tmp_path: Path, rows: list[tuple[float, float, str]]) -> None:
    # The csv module of the standard library writes [RFC 4180].
    rows = [(a, b, text.replace("\r", "").replace("\n", "").strip()) for a, b, text in rows]
    written_text = io.StringIO(newline="")
    csv.writer(written_text).writerows([("azimuth_deg", "elevation_deg", "obstacle"), *rows])
    table = table_of(written(tmp_path, written_text.getvalue()))
    assert table.mistakes == ()
    assert table.numbers["azimuth_deg"].tolist() == [row[0] for row in rows]
    assert table.numbers["elevation_deg"].tolist() == [row[1] for row in rows]
    assert table.texts["obstacle"] == tuple(row[2] or None for row in rows)


@FUZZ
@given(content=st.binary(max_size=120))
@example(content=b"azimuth_deg,elevation_deg\n\x00,1\n")
@example(content=b"azimuth_deg,elevation_deg\n" + b"9" * 5000 + b",1\n")
@example(content=b'azimuth_deg,elevation_deg,obstacle\n1,2,"' + b"x" * 140_000 + b'"\n')
def test_arbitrary_bytes_raise_nothing_but_input_errors(tmp_path: Path, content: bytes) -> None:
    try:
        table_of(written(tmp_path, content))
    except InputError as error:
        assert error.mistakes


@FUZZ
@given(body=st.text(st.sampled_from('0123456789.,;"\n\r\t -e#ax'), max_size=80))
def test_arbitrary_rows_raise_nothing_but_input_errors(tmp_path: Path, body: str) -> None:
    try:
        table = table_of(written(tmp_path, "azimuth_deg,elevation_deg\n" + body))
    except InputError as error:
        assert error.mistakes
    else:
        bad = np.isnan(table.numbers["azimuth_deg"]) | np.isnan(table.numbers["elevation_deg"])
        assert bad.any() <= bool(table.mistakes)
