"""The starter site."""

import re
from pathlib import Path

import pytest

from siteassess.errors import InputError, OutputError
from siteassess.site_file import starter
from siteassess.site_file.read import read_site
from siteassess.site_file.starter import write_starter
from siteassess.tables import read_user_table


def files_in(folder: Path) -> list[str]:
    return sorted(path.name for path in folder.iterdir())


@pytest.mark.parametrize("folder", ["new", "new/deeper", "."])
def test_starter_is_a_site_in_a_new_or_an_empty_folder(tmp_path: Path, folder: str) -> None:
    write_starter(tmp_path / folder)
    assert files_in(tmp_path / folder) == ["horizon.csv", "site.toml"]
    site = read_site(tmp_path / folder)
    assert site.horizon[0].file == "horizon.csv"
    table = read_user_table(
        tmp_path / folder / "horizon.csv",
        numbers=("azimuth_deg", "elevation_deg", "distance_m", "depth_m"),
        texts=("obstacle", "cover", "leaf"),
        required=("azimuth_deg", "elevation_deg"),
    )
    assert not table.mistakes


def test_every_line_that_is_off_can_be_switched_on(tmp_path: Path) -> None:
    write_starter(tmp_path / "new")
    path = tmp_path / "new" / "site.toml"
    text = re.sub(r"(?m)^# (?=[a-z_]+ = |\[\[)", "", path.read_text(encoding="utf-8"))
    # Positions may be given once only, and a geoid height belongs to an orthometric height.
    text = re.sub(r"(?m)^(landmark_)?(latitude|longitude|bearing)_deg = ", r"# \g<0>", text)
    text = text.replace('height_system = "ellipsoidal"', 'height_system = "orthometric"')
    path.write_text(text, encoding="utf-8")
    site = read_site(path)
    assert site.position.latitude_deg == pytest.approx(46.5, abs=0.01)
    assert site.position.longitude_deg == pytest.approx(6.5, abs=0.01)
    assert site.position.height_m == 530.0


def test_starter_changes_no_folder_that_is_not_empty(tmp_path: Path) -> None:
    (tmp_path / "notes.txt").write_text("mine", encoding="utf-8")
    with pytest.raises(InputError) as caught:
        write_starter(tmp_path)
    allowed = "a new site needs a new or an empty folder"
    assert str(caught.value) == f"{tmp_path.name}: the folder is not empty; {allowed}"
    assert files_in(tmp_path) == ["notes.txt"]


@pytest.mark.parametrize("folder", ["notes.txt", "notes.txt/new"])
def test_starter_leaves_a_file_in_its_place(tmp_path: Path, folder: str) -> None:
    (tmp_path / "notes.txt").write_text("mine", encoding="utf-8")
    with pytest.raises(InputError) as caught:
        write_starter(tmp_path / folder)
    name = Path(folder).name
    allowed = "a new site needs a new or an empty folder"
    assert str(caught.value) == f"{name}: there is a file in its place; {allowed}"


def test_nothing_is_left_when_the_disk_fails(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def full(self: Path, content: bytes) -> int:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(starter.Path, "write_bytes", full)
    with pytest.raises(OutputError) as caught:
        write_starter(tmp_path / "new")
    assert str(caught.value) == "new: the site cannot be written; no space left on device"
    assert files_in(tmp_path / "new") == []
