"""The report: every number of the assessment is in it, as searchable text, and it prints well."""

from __future__ import annotations

import io
import json
import re
from itertools import product
from typing import Any

import msgspec
import pypdf
import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QPushButton

from app.cautions import cautions
from app.export import results_json
from app.looked_at import LookedAt
from app.open_selection import OpenSelection
from app.pages.report import ReportPage
from app.picture import Problem, picture_of
from app.report.content import sections_of
from app.report.options import PageSize, ReportOptions
from app.report.pdf import report_pdf
from app.report.wording import amount, at_corner, percent
from app.selection_file import demo_selection, read_selection, selection_from_bytes
from app.theme import LIGHT
from engine.assessment import assess
from engine.errors import InvalidSelection
from engine.selection import Selection, with_entry


def pdf_of(selection: Selection, **options: Any) -> pypdf.PdfReader:
    data = report_pdf(selection, assess(selection), ReportOptions(**options))
    return pypdf.PdfReader(io.BytesIO(data))


def text_of(reader: pypdf.PdfReader) -> str:
    """All text without white space: a PDF parts words as it likes."""
    return re.sub(r"\s", "", "".join(page.extract_text() for page in reader.pages))


def squeezed(text: str) -> str:
    return re.sub(r"\s", "", text)


@pytest.fixture(scope="module")
def demo_pdf(qapp: object) -> pypdf.PdfReader:
    return pdf_of(demo_selection())


@pytest.fixture(scope="module")
def demo_pages(demo_pdf: pypdf.PdfReader) -> list[str]:
    return [squeezed(page.extract_text()) for page in demo_pdf.pages]


@pytest.fixture(scope="module")
def demo_text(demo_pages: list[str]) -> str:
    return "".join(demo_pages)


def test_every_check_stands_in_the_text_with_its_number_and_law(demo_text: str) -> None:
    for number, result in enumerate(assess(demo_selection()).candidates, start=1):
        for row, check in enumerate(result.checks, start=1):
            assert f"C{number}-{row:02d}" in demo_text
            assert squeezed(check.how or check.reason or "") in demo_text


def test_every_check_stands_with_its_figures_and_verdict_in_one_line(demo_text: str) -> None:
    for number, result in enumerate(assess(demo_selection()).candidates, start=1):
        for row, check in enumerate(result.checks, start=1):
            # The overview names the deciding check before its own line does.
            line = demo_text.split(f"C{number}-{row:02d}")[-1]
            upto, word, _ = line.partition(squeezed(check.verdict))
            assert word
            if check.corner is not None:
                assert squeezed(amount(check.applied, check.unit)) in upto
                assert squeezed(amount(check.allowed, check.unit)) in upto
                assert squeezed(percent(check.headroom_pct)) in upto


def test_every_compared_check_names_its_corner(demo_text: str) -> None:
    corners = {
        check.corner
        for result in assess(demo_selection()).candidates
        for check in result.checks
        if check.corner is not None
    }
    assert len(corners) > 3
    for corner in corners:
        assert squeezed(at_corner(corner)) in demo_text


def test_the_contents_give_the_page_of_every_section(demo_pages: list[str]) -> None:
    contents = demo_pages[0].partition("Contents")[2]
    sections = sections_of(demo_selection(), assess(demo_selection()))
    titles = [squeezed(section.title) for section in sections[3:]]
    assert len(titles) > 8
    for title in titles:
        numbers = [n for n, text in enumerate(demo_pages, start=1) if n > 1 and title in text]
        assert f"{numbers[0]}{title}" in contents


def test_the_fingerprint_stands_in_three_groups_of_four(demo_pdf: pypdf.PdfReader) -> None:
    mark = assess(demo_selection()).fingerprint
    groups = rf"fingerprint\s{mark[:4]}\s{mark[4:8]}\s{mark[8:]}\s"
    assert re.search(groups, demo_pdf.pages[1].extract_text())


def test_the_cautions_and_how_to_reopen_stand_on_the_first_page(demo_pages: list[str]) -> None:
    assert all(squeezed(caution) in demo_pages[0] for caution in cautions())
    assert squeezed("open it with 'python3 -m app selection.json'") in demo_pages[0]


def test_equal_input_gives_equal_pages(qapp: object) -> None:
    one, two = (pdf_of(demo_selection()) for _ in range(2))
    for page, other in zip(one.pages, two.pages, strict=True):
        assert page.get_contents().get_data() == other.get_contents().get_data()


def test_the_chosen_candidate_may_stand_alone_under_its_own_number(qapp: object) -> None:
    second = demo_selection().candidates[1].name
    text = text_of(pdf_of(with_entry(demo_selection(), "chosen", second), only_chosen=True))
    assert "C2-01" in text
    assert "C1-01" not in text


def test_assumed_values_are_marked_in_words(qapp: object) -> None:
    selection = with_entry(demo_selection(), "cooling.ambient_low_C", None)
    assert squeezed("ambient 40 °C 40 °C 45 °C assumed: low") in text_of(pdf_of(selection))


def test_branches_that_differ_are_given_one_by_one(qapp: object) -> None:
    selection = with_entry(demo_selection(), "load.connection", "delta")
    selection = with_entry(selection, "load.resistance_ohm", (9.0, 12.0, 7.0))
    text = text_of(pdf_of(selection))
    assert squeezed("9 Ω, 12 Ω, 7 Ω (AB, BC, CA)") in text
    assert squeezed("branch current, rms") in text


def test_sections_come_in_the_order_of_reading(demo_text: str) -> None:
    titles = [squeezed(s.title) for s in sections_of(demo_selection(), assess(demo_selection()))]
    places = [demo_text.index(title) for title in titles]
    assert places == sorted(places)


def test_head_and_foot_of_every_page(demo_pages: list[str]) -> None:
    mark = assess(demo_selection()).fingerprint
    count = len(demo_pages)
    for number, text in enumerate(demo_pages, start=1):
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
    page = pdf_of(demo_selection(), paper=size).pages[0]
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
    assert text.count("allowedheadroomverdict") > 12
    assert "C12-26" in text


def test_marked_letters_in_entries_are_printed_as_they_are(qapp: object) -> None:
    selection = with_entry(demo_selection(), "title", "R < 3 & <b>L</b>")
    assert squeezed("R < 3 & <b>L</b>") in text_of(pdf_of(selection))


def test_a_report_opens_as_the_selection_it_carries(tmp_path, qapp: object) -> None:
    path = tmp_path / "report.pdf"
    path.write_bytes(report_pdf(demo_selection(), assess(demo_selection())))
    opened = read_selection(path)
    assert opened.selection == demo_selection()
    assert opened.path is None


def test_a_pdf_without_a_selection_says_so(tmp_path) -> None:
    path = tmp_path / "other.pdf"
    path.write_bytes(b"%PDF-1.4\n1 0 obj\n<<>>\nstream\nnothing\nendstream\nendobj\n%%EOF")
    with pytest.raises(InvalidSelection, match="no selection in this PDF; ask for the original"):
        read_selection(path)


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
    qtbot.mouseClick(page.paper.findChildren(QPushButton)[1], Qt.MouseButton.LeftButton)
    with qtbot.waitSignal(page.report_asked) as asked:
        qtbot.mouseClick(page.save, Qt.MouseButton.LeftButton)
    assert asked.args == [ReportOptions(paper="Letter")]


def test_only_the_chosen_candidate_may_be_shown(qtbot, page: ReportPage) -> None:
    before = len(page.sheets.sheets)
    only = page.candidates.findChildren(QPushButton)[1]
    qtbot.mouseClick(only, Qt.MouseButton.LeftButton)
    assert len(page.sheets.sheets) < before
    with qtbot.waitSignal(page.report_asked) as asked:
        qtbot.mouseClick(page.save, Qt.MouseButton.LeftButton)
    assert asked.args == [ReportOptions(only_chosen=True)]


def test_stale_pages_are_faded_and_their_verdicts_have_no_mark(page: ReportPage) -> None:
    mark = LIGHT.verdict["undersized"].rgb()

    def marked() -> bool:
        sheet = page.sheets.sheets[0].grab().toImage()
        places = product(range(sheet.width()), range(sheet.height()))
        return any(sheet.pixel(x, y) == mark for x, y in places)

    assert marked()
    page.show_stale((Problem("supply.voltage_V", "must be a number"),))
    assert not marked()
    assert "link voltage: must be a number" in page.said.text()


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


def test_a_line_of_the_list_leads_to_its_entry(qtbot, page: ReportPage) -> None:
    bare = with_entry(demo_selection(), "candidates.1.switch.tq_s", None)
    page.show_picture(picture_of(bare, LookedAt()))
    lines = {button.text(): button for button in page.findChildren(QPushButton)}
    missing = lines[f"{bare.candidates[1].name}: t_q missing"]
    with qtbot.waitSignal(page.asked) as asked:
        qtbot.mouseClick(missing, Qt.MouseButton.LeftButton)
    assert asked.args == ["candidates.1.switch.tq_s"]
