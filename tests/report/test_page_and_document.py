"""Page and document: the same words, and no name that turns into markup."""

import dataclasses
import json
import re
from html.parser import HTMLParser
from importlib import resources

import pytest
import typst

from siteassess.report.content import report_content
from siteassess.report.document import document_pdf
from siteassess.report.figures.all_figures import report_figures
from siteassess.report.page import page_html
from siteassess.report.sections.setting import CAUTIONS


class Page(HTMLParser):
    """Texts and elements of a page, as a browser would take them apart."""

    def __init__(self, html):
        super().__init__(convert_charrefs=True)
        self.texts, self.elements, self.addresses = [], [], []
        self.feed(html)

    def handle_starttag(self, tag, attributes):
        self.elements.append(tag)
        self.addresses += [value for name, value in attributes if name in ("href", "src", "xlink:href")]

    def handle_data(self, data):
        self.texts.append(" ".join(data.split()))

    @property
    def text(self):
        return " ".join(self.texts)


@pytest.fixture(scope="module")
def content(markup_assessment):
    return report_content(markup_assessment)


@pytest.fixture(scope="module")
def figures(markup_assessment):
    return report_figures(markup_assessment)


@pytest.fixture(scope="module")
def html(content, figures):
    return page_html(content, figures)


def document_elements(content, figures, selector):
    """What typst finds in the set document."""
    layout = resources.files("siteassess.report").joinpath("document.typ").read_bytes()
    inputs = {"content": json.dumps(dataclasses.asdict(content)), "figures": json.dumps(figures)}
    return json.loads(typst.query(layout, selector, ignore_system_fonts=True, sys_inputs=inputs))


def text_of(node):
    """All letters of an element of the document, in reading order."""
    if isinstance(node, list):
        return "".join(text_of(child) for child in node)
    if node["func"] in ("text", "space"):
        return node.get("text", " ")
    return "".join(text_of(node[key]) for key in ("body", "child", "children") if key in node)


def parts_of(node, kind):
    """Elements of one kind within an element of the document."""
    if isinstance(node, dict) and node.get("func") == kind:
        return [node]
    children = node.values() if isinstance(node, dict) else node if isinstance(node, list) else []
    return [part for child in children for part in parts_of(child, kind)]


def said(content):
    """Every text of the content."""
    yield from (content.title, content.site, content.verdict, content.cautions_heading, content.sign_heading)
    yield from content.cautions + content.photographs + content.signatures
    for answer in content.answers:
        yield from (answer.question, answer.answer)
    for fact in content.facts:
        yield from fact
    for section in (*content.sections, content.appendix):
        yield section.heading
        yield from section.sentences + section.points
        for table in section.tables:
            yield table.caption
            yield from table.header
            for row in table.rows:
                yield from row


def test_page_says_all_of_the_content(content, html):
    text = Page(html).text
    missing = [words for words in said(content) if " ".join(words.split()) not in text]
    assert missing == []


def test_page_answers_and_warns_before_anything_else(content, html):
    text = Page(html).text
    first_section = text.index(content.sections[0].heading)
    for words in (content.verdict, content.answers[2].answer, *CAUTIONS):
        assert text.index(" ".join(words.split())) < first_section


def test_page_needs_nothing_from_outside(html):
    page = Page(html)
    assert all(address.startswith(("#", "data:image/png;base64,")) for address in page.addresses)
    assert not {"script", "link", "iframe", "object", "img"} & set(page.elements)
    assert "@import" not in html
    assert not re.search(r"url\((?!#)", html)


def test_names_of_parts_are_unique_on_the_page(html):
    names = re.findall(r'\bid="([^"]+)"', html)
    assert len(names) == len(set(names))
    assert set(re.findall(r'href="#([^"]+)"', html)) <= set(names)


def test_page_shows_markup_in_names_as_text(markup_assessment, html):
    text = Page(html).text
    assert markup_assessment.site.place.name in text
    assert "<script>alert(1)</script>" in text
    assert "<script" not in html
    assert "<b>" not in html


def test_document_says_all_of_the_tables(content, figures):
    cells = {text_of(cell) for cell in parts_of(document_elements(content, figures, "table"), "cell")}
    expected = {
        cell
        for section in (*content.sections, content.appendix)
        for table in section.tables
        for row in (table.header, *table.rows)
        for cell in row
    }
    assert expected - cells == set()


def test_document_has_the_headings_of_the_content(content, figures):
    headings = [text_of(heading) for heading in document_elements(content, figures, "heading")]
    assert headings == [
        content.site,
        *(section.heading for section in content.sections),
        content.sign_heading,
        content.appendix.heading,
    ]


def test_document_has_cautions_and_assumptions(content, figures):
    lists = document_elements(content, figures, "list")
    points = [text_of(item) for item in parts_of(lists, "item")]
    assert points == [*CAUTIONS, *(point for section in content.sections for point in section.points)]


def test_document_is_a_pdf_without_a_date(content, figures):
    pdf = document_pdf(content, figures)
    assert pdf.startswith(b"%PDF-")
    assert b"CreationDate" not in pdf
    assert b"ModDate" not in pdf


def test_names_that_no_font_can_show_do_no_harm(content, figures):
    named = dataclasses.replace(content, site="\u5317\u5854 \U0001f6f0 \u05d0\u0628 " + "x" * 180)
    assert document_pdf(named, figures).startswith(b"%PDF-")
    assert named.site in Page(page_html(named, figures)).text
