"""The report as one HTML file that needs nothing else."""

import re
from importlib import resources

from siteassess.report.pieces import Content

__all__ = ["page_html"]


def page_html(content: Content, figures: dict[str, str]) -> str:
    """The page: texts of the content, figures drawn in, style inside, no script and no link to the outside.

    Parameters
    ----------
    content : Content
        What is said.
    figures : dict of str to str
        By name, as SVG.
    """
    from jinja2 import Environment, StrictUndefined
    from markupsafe import Markup

    layout = resources.files("siteassess.report").joinpath("page.html").read_text(encoding="utf-8")
    environment = Environment(
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
        keep_trailing_newline=True,
    )
    drawn = {name: Markup(inlined(svg, name)) for name, svg in figures.items()}
    return environment.from_string(layout).render(content=content, figures=drawn)


def inlined(svg: str, prefix: str) -> str:
    """An SVG file as an element of a page: no prolog, and names that no other figure of the page has.

    Examples
    --------
    >>> inlined('<?xml version="1.0"?><svg><g id="a"/><use xlink:href="#a"/></svg>', "sky")
    '<svg><g id="sky-a"/><use xlink:href="#sky-a"/></svg>'
    """
    element = svg[svg.index("<svg") :].rstrip()
    return re.sub(r'(\bid="|href="#|url\(#)', rf"\g<1>{prefix}-", element)
