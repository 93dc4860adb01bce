"""Redraw the pictures of the README: ``python tests/builders/build_pictures.py``."""

from pathlib import Path

from siteassess import assess, read_site
from siteassess.report.figures.skyplot import skyplot_svg

ROOT = Path(__file__).parent.parent.parent


def main() -> None:
    assessment = assess(read_site(ROOT / "example_sites" / "harbour" / "silo_yard"))
    picture = ROOT / "docs" / "pictures" / "silo_yard_skyplot.svg"
    picture.parent.mkdir(exist_ok=True)
    picture.write_text(skyplot_svg(assessment), encoding="utf-8", newline="\n")


if __name__ == "__main__":
    main()
