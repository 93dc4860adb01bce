"""Writes a ranking: five files, all or none."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING

from siteassess.report.put_in_place import NewFile, put_files

if TYPE_CHECKING:
    from siteassess.candidates.ranking import Ranking

__all__ = ["RANKING_FILES", "write_ranking"]

RANKING_FILES = ("ranking.html", "ranking.pdf", "ranking.json", "ranking.csv", "ranking.svg")


def write_ranking(
    ranking: Ranking, folder: str | Path, progress: Callable[[str], None] | None = None
) -> None:
    """Write the five files of a ranking into a folder; other files there are left alone.

    Parameters
    ----------
    ranking : Ranking
        At least one site of which has a rank.
    folder : str or Path
        Where to; made when it does not exist.
    progress : function, optional
        Called with a few words before each step.

    Raises
    ------
    OutputError
        If the folder or a file cannot be made or replaced; what stood there before still stands.
    """
    put_files(_files(ranking, progress or (lambda words: None)), folder, progress)


def _files(ranking: Ranking, tell: Callable[[str], None]) -> Iterator[NewFile]:
    from siteassess.report.document import document_pdf
    from siteassess.report.page import page_html
    from siteassess.report.ranking.chart import chart_svg
    from siteassess.report.ranking.content import ranking_content
    from siteassess.report.ranking.results import ranking_csv, ranking_json

    tell("drawing the chart")
    figures = {"ranking": chart_svg(ranking)}
    content = ranking_content(ranking)
    yield NewFile("ranking.html", lambda: page_html(content, figures).encode(), "writing the page")
    yield NewFile("ranking.pdf", lambda: document_pdf(content, figures), "setting the document")
    yield NewFile("ranking.json", lambda: ranking_json(ranking).encode(), "writing the results")
    yield NewFile("ranking.csv", lambda: ranking_csv(ranking).encode(), "writing the table")
    yield NewFile("ranking.svg", lambda: figures["ranking"].encode())
