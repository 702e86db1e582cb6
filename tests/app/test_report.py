"""The report: every number of the assessment is in it, as searchable text, and it prints well."""

from __future__ import annotations

import io
import json
import re

import msgspec
import pypdf
import pytest
from PySide6.QtCore import Qt

from app.export import results_json
from app.looked_at import LookedAt
from app.open_selection import OpenSelection
from app.pages.report import ReportPage
from app.picture import Problem, picture_of
from app.report.content import sections_of
from app.report.pdf import PageSize, report_pdf
from app.selection_file import demo_selection, selection_from_bytes
from engine.assessment import assess
from engine.selection import Selection, with_entry


def pdf_of(selection: Selection, size: PageSize = "A4") -> pypdf.PdfReader:
    return pypdf.PdfReader(io.BytesIO(report_pdf(selection, assess(selection), size)))


def text_of(reader: pypdf.PdfReader) -> str:
    """All text without white space: a PDF parts words as it likes."""
    return re.sub(r"\s", "", "".join(page.extract_text() for page in reader.pages))


def squeezed(text: str) -> str:
    return re.sub(r"\s", "", text)


@pytest.fixture(scope="module")
def demo_pdf(qapp: object) -> pypdf.PdfReader:
    return pdf_of(demo_selection())


@pytest.fixture(scope="module")
def demo_text(demo_pdf: pypdf.PdfReader) -> str:
    return text_of(demo_pdf)


def test_every_check_stands_in_the_text_with_its_number_and_law(demo_text: str) -> None:
    for number, result in enumerate(assess(demo_selection()).candidates, start=1):
        for row, check in enumerate(result.checks, start=1):
            assert f"C{number}-{row:02d}" in demo_text
            assert squeezed(check.how or check.reason or "") in demo_text


def test_sections_come_in_the_order_of_reading(demo_text: str) -> None:
    titles = [squeezed(s.title) for s in sections_of(demo_selection(), assess(demo_selection()))]
    places = [demo_text.index(title) for title in titles]
    assert places == sorted(places)


def test_head_and_foot_of_every_page(demo_pdf) -> None:
    mark = assess(demo_selection()).fingerprint
    count = len(demo_pdf.pages)
    for number, page in enumerate(demo_pdf.pages, start=1):
        text = squeezed(page.extract_text())
        assert f"page{number}of{count}" in text
        assert mark in text
        assert squeezed(demo_selection().title) in text


def test_fonts_are_embedded_and_nothing_is_a_raster_image(demo_pdf) -> None:
    for page in demo_pdf.pages:
        assert not page.images
        for font in page["/Resources"]["/Font"].values():
            descendant = font.get_object()["/DescendantFonts"][0].get_object()
            assert "/FontFile2" in descendant["/FontDescriptor"]


def test_selection_and_results_are_attached(demo_pdf) -> None:
    attached = {name: data[0] for name, data in demo_pdf.attachments.items()}
    assert selection_from_bytes(attached["selection.json"]) == demo_selection()
    assert attached["results.json"] == results_json(assess(demo_selection()))
    assert json.loads(attached["results.json"])["program"] == "switchwright"


@pytest.mark.parametrize(("size", "width"), [("A4", 595), ("Letter", 612)])
def test_paper_is_a4_or_letter(size: PageSize, width: int, qapp: object) -> None:
    page = pdf_of(demo_selection(), size).pages[0]
    assert float(page.mediabox.width) == pytest.approx(width, abs=1.0)


def test_without_candidates_it_says_what_is_wanted(qapp: object) -> None:
    bare = with_entry(with_entry(demo_selection(), "candidates", ()), "chosen", "")
    text = text_of(pdf_of(bare))
    assert squeezed("What the parts must at least stand") in text
    assert "V_DRM" in text


def test_many_candidates_break_over_pages_with_heads_repeated(qapp: object) -> None:
    first = demo_selection().candidates[0]
    many = tuple(msgspec.structs.replace(first, name=f"candidate {n}") for n in range(12))
    selection = with_entry(with_entry(demo_selection(), "chosen", ""), "candidates", many)
    text = text_of(pdf_of(selection))
    assert text.count("headroomwoulddo") > 12
    assert "C12-26" in text


def test_marked_letters_in_entries_are_printed_as_they_are(qapp: object) -> None:
    selection = with_entry(demo_selection(), "title", "R < 3 & <b>L</b>")
    assert squeezed("R < 3 & <b>L</b>") in text_of(pdf_of(selection))


# The page of the window ---------------------------------------------------------------------


@pytest.fixture
def document(qtbot) -> OpenSelection:
    document = OpenSelection()
    document.open(demo_selection(), None)
    return document


@pytest.fixture
def page(qtbot, document: OpenSelection) -> ReportPage:
    page = ReportPage(document)
    qtbot.addWidget(page)
    page.resize(1200, 700)
    page.show()
    page.show_picture(picture_of(document.selection, LookedAt()))
    qtbot.waitUntil(lambda: bool(page.sheets.sheets), timeout=5000)
    return page


def test_the_page_shows_the_sheets_that_will_print(page: ReportPage) -> None:
    assert len(page.sheets.sheets) == len(pdf_of(demo_selection()).pages)


def test_typing_a_title_is_one_undo_step(qtbot, page: ReportPage, document: OpenSelection) -> None:
    before = document.selection
    page.texts["reference"].clear()
    qtbot.keyClicks(page.texts["reference"], "W-17")
    assert document.selection.reference == "W-17"
    while document.undo_stack.canUndo():
        document.undo_stack.undo()
    assert document.selection == before
    assert page.texts["reference"].text() == before.reference


def test_saving_is_asked_with_the_paper_chosen(qtbot, page: ReportPage) -> None:
    page.paper.entered.emit("Letter")
    with qtbot.waitSignal(page.report_asked) as asked:
        qtbot.mouseClick(page.save, Qt.MouseButton.LeftButton)
    assert asked.args == ["Letter"]


def test_stale_pages_cannot_be_saved(page: ReportPage) -> None:
    page.show_stale((Problem("supply.voltage_V", "must be a number"),))
    assert not page.save.isEnabled()
    assert page.sheets.stale
    page.show_picture(picture_of(demo_selection(), LookedAt()))
    assert page.save.isEnabled()


def test_an_incomplete_document_has_no_pages(page: ReportPage) -> None:
    page.show_incomplete(("supply.voltage_V",))
    assert not page.sheets.sheets
    assert not page.save.isEnabled()
