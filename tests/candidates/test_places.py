"""Which sites are meant, however they are named."""

import os
from pathlib import Path

import pytest

from siteassess.candidates.places import distinct_sites


@pytest.fixture
def harbour(tmp_path: Path) -> Path:
    for name in ("quay", "yard"):
        (tmp_path / "harbour" / name).mkdir(parents=True)
        (tmp_path / "harbour" / name / "site.toml").write_text("")
    (tmp_path / "harbour" / "roof.toml").write_text("")
    return tmp_path / "harbour"


def places(*paths: Path | str) -> list[str]:
    return [site.place for site in distinct_sites(paths)]


def test_place_is_seen_from_the_common_folder(harbour: Path) -> None:
    assert places(harbour / "yard", harbour / "quay", harbour / "roof.toml") == ["quay", "roof.toml", "yard"]
    assert places(harbour / "quay", harbour.parent / "elsewhere" / "roof.toml") == [
        "elsewhere/roof.toml",
        "harbour/quay",
    ]
    assert places(harbour / "quay") == ["quay"]


def test_folder_and_its_site_file_are_one_site(harbour: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(harbour)
    ways = ["quay", "quay/", "./quay", "quay/site.toml", harbour / "quay", "yard/../quay"]
    (site,) = distinct_sites(ways)
    assert (site.place, site.repeated) == ("quay", True)


def test_place_does_not_depend_on_the_working_folder(harbour: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    absolute = places(harbour / "quay", harbour / "roof.toml")
    monkeypatch.chdir(harbour)
    assert places("roof.toml", "quay") == absolute
    monkeypatch.chdir(harbour / "quay")
    assert places(".", "../roof.toml") == absolute


def test_site_inside_the_folder_of_another(harbour: Path) -> None:
    inner = harbour / "quay" / "mast"
    inner.mkdir()
    (inner / "site.toml").write_text("")
    assert places(harbour / "quay", inner) == ["quay", "quay/mast"]


@pytest.mark.skipif(os.name == "nt", reason="links need a privilege there")
def test_link_to_a_folder_is_that_folder_and_link_to_a_file_is_a_site_of_its_own(harbour: Path) -> None:
    (harbour / "again").symlink_to(harbour / "quay")
    assert places(harbour / "quay", harbour / "again") == ["quay"]
    (harbour / "spare").mkdir()
    (harbour / "spare" / "site.toml").symlink_to(harbour / "quay" / "site.toml")
    assert places(harbour / "quay", harbour / "spare") == ["quay", "spare"]


@pytest.mark.skipif(os.name != "posix", reason="names of files are bytes there")
def test_name_that_is_no_text_is_written_as_far_as_it_is(harbour: Path) -> None:
    strange = os.fsdecode(b"bay \xff.toml")
    (place,) = places(harbour / strange)
    assert place == "bay \N{REPLACEMENT CHARACTER}.toml"
    place.encode()


def test_no_site_is_no_site() -> None:
    assert distinct_sites([]) == ()
