"""The report as a PDF, set by typst with its packaged fonts only."""

import json
from dataclasses import asdict
from importlib import resources

from siteassess.report.pieces import Content

__all__ = ["document_pdf"]


def document_pdf(content: Content, figures: dict[str, str]) -> bytes:
    """The document, on A4; the same bytes for the same content.

    Texts reach the layout as JSON, so that no name can be taken for markup.

    Parameters
    ----------
    content : Content
        What is said.
    figures : dict of str to str
        By name, as SVG.
    """
    import typst

    layout = resources.files("siteassess.report").joinpath("document.typ").read_bytes()
    return typst.compile(
        layout,
        format="pdf",
        ignore_system_fonts=True,
        sys_inputs={"content": json.dumps(asdict(content)), "figures": json.dumps(figures)},
    )
