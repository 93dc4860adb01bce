"""Records of what a report says, before anything lays it out."""

from dataclasses import dataclass

__all__ = ["Answer", "Content", "Section", "Table"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Table:
    """A table of texts.

    Attributes
    ----------
    caption : str
        One sentence: what the table shows and how to read it.
    header : tuple of str
        Column headings, with units; a line break in one is for paper, where columns are narrow.
    rows : tuple of tuple of str
        Cells; every row has as many as `header`.
    align : str
        One letter a column: "l" for texts, "r" for numbers.
    tones : tuple of str
        One word a row, a hint for the layout: "met", "missed", "unproven", "total" or "" for none.
    """

    caption: str
    header: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]
    align: str
    tones: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Section:
    """One headed part of the report: sentences, then a figure, then tables, then points.

    Attributes
    ----------
    key : str
        Short word for links within the report.
    heading : str
        Heading.
    sentences : tuple of str
        Paragraphs.
    figure : str
        Name of a figure, as `report_figures` has it, or "" for none.
    figure_caption : str
        What the figure shows and how to read it.
    tables : tuple of Table
        Tables.
    points : tuple of str
        List of single statements.
    """

    key: str
    heading: str
    sentences: tuple[str, ...] = ()
    figure: str = ""
    figure_caption: str = ""
    tables: tuple[Table, ...] = ()
    points: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Answer:
    """A question that the reader brings along, its answer, and a short label for both."""

    label: str
    question: str
    answer: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Content:
    """All that the page and the document say.

    Attributes
    ----------
    title : str
        What kind of report this is.
    site : str
        Name of the spot.
    outcome : str
        "pass", "fail" or "unproven", for the layout.
    verdict : str
        The same in words, for the reader.
    answers : tuple of Answer
        The first page.
    facts : tuple of tuple of str
        Pairs of label and value that say what was assessed.
    cautions_heading, cautions : str, tuple of str
        What the reader must not take the report for.
    sections : tuple of Section
        Everything else, in the order of reading.
    sign_heading, photographs, signatures : str, tuple of str, tuple of str
        Heading and labels of the boxes that are filled in by hand, where there are any; they come before the
        appendix.
    appendix : Section or None
        Satellite by satellite.
    maker : str
        Program and version.
    """

    title: str
    site: str
    outcome: str
    verdict: str
    answers: tuple[Answer, ...]
    facts: tuple[tuple[str, str], ...]
    cautions_heading: str
    cautions: tuple[str, ...]
    sections: tuple[Section, ...]
    maker: str
    sign_heading: str = ""
    photographs: tuple[str, ...] = ()
    signatures: tuple[str, ...] = ()
    appendix: Section | None = None
