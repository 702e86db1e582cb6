"""Where pages break, and how text and names are set."""

from __future__ import annotations

from dataclasses import replace

import pytest

from app.report.blocks import Blanks, Column, Contents, Paragraph, Row, Section, Table
from app.report.flow import Page, Slice, kept_together, pages_of, pages_of_titles, white
from app.report.layout import laid_out
from app.report.text import Text, elided, print_font
from app.report.waveform_figure import spread
from app.report.wording import amount, in_one_unit, percent
from app.theme import LIGHT, load_fonts


def strip(height: float, **more: object) -> Slice:
    return replace(Slice(height, lambda painter, top: None), **more)


def heights(pages: tuple[Page, ...]) -> list[list[float]]:
    return [[placed.slice.height for placed in page] for page in pages]


def test_slices_fill_a_page_before_the_next_begins() -> None:
    assert heights(pages_of([strip(40.0)] * 5, 100.0)) == [[40.0, 40.0], [40.0, 40.0], [40.0]]


def test_what_is_kept_together_moves_on_as_one() -> None:
    run = kept_together([strip(20.0), strip(30.0)])
    assert heights(pages_of([strip(60.0), *run], 100.0)) == [[60.0], [20.0, 30.0]]


def test_a_run_longer_than_a_page_still_breaks() -> None:
    run = kept_together([strip(60.0)] * 3)
    assert heights(pages_of([strip(60.0), *run], 100.0)) == [[60.0]] * 4


def test_white_space_vanishes_at_the_top_of_a_page() -> None:
    pages = pages_of([strip(90.0), white(20.0), strip(50.0)], 100.0)
    assert heights(pages) == [[90.0], [50.0]]
    assert pages[1][0].top == 0.0


def test_a_head_is_repeated_where_its_row_begins_a_page() -> None:
    head = strip(10.0, with_next=True)
    rows = [strip(40.0, head=head)] * 3
    pages = pages_of([head, *rows], 100.0)
    assert heights(pages) == [[10.0, 40.0, 40.0], [10.0, 40.0]]
    assert pages[1][1].top == 10.0


def test_a_new_page_begins_where_it_is_asked_for() -> None:
    slices = [strip(40.0), strip(10.0, new_page=True, title="second")]
    pages = pages_of(slices, 100.0)
    assert heights(pages) == [[40.0], [10.0]]
    assert pages_of_titles(pages) == {"second": 2}


def test_a_page_with_hardly_anything_on_it_is_filled_further() -> None:
    slices = [strip(30.0), strip(10.0, new_page=True, title="second")]
    assert heights(pages_of(slices, 100.0)) == [[30.0, 10.0]]


def test_no_slice_is_lost_and_none_overlaps() -> None:
    slices = [strip(7.0 + n % 13, with_next=n % 4 == 0) for n in range(200)]
    pages = pages_of(slices, 100.0)
    assert [placed.slice for page in pages for placed in page] == slices
    for page in pages:
        ends = [placed.top + placed.slice.height for placed in page]
        assert ends[-1] <= 100.0
        assert [placed.top for placed in page[1:]] == pytest.approx(ends[:-1])


COLUMNS = (Column("no.", 20), Column("value", 30, right=True), Column("verdict", 50))


def table(count: int, **more: object) -> Table:
    rows = tuple(Row((f"{n}", "1"), verdict="tight", below="why") for n in range(count))
    return replace(Table(COLUMNS, rows), **more)


@pytest.fixture
def _fonts(qapp: object) -> None:
    load_fonts()


@pytest.mark.usefixtures("_fonts")
def test_a_short_table_stays_whole() -> None:
    text = Paragraph("word " * 400)
    section = Section("one", (text, table(6, whole=True)))
    first, second = laid_out([section], 600.0, 380.0)
    assert len(second) >= 8
    assert all(placed.slice.head is None for placed in first)


@pytest.mark.usefixtures("_fonts")
def test_no_row_stands_alone_at_the_end_of_a_table() -> None:
    for count in range(20, 40):
        pages = laid_out([Section("one", (table(count),))], 600.0, 700.0)
        rows = [placed for placed in pages[-1] if placed.slice.head is not None]
        assert len(rows) >= 2


@pytest.mark.usefixtures("_fonts")
def test_a_heading_is_never_the_last_of_a_page() -> None:
    for count in range(1, 60):
        blocks = (Paragraph("a " * 30 * count), Paragraph("head", "heading"), Paragraph("text"))
        pages = laid_out([Section("one", blocks)], 300.0, 400.0)
        assert len(pages[-1]) >= 2 or len(pages) == 1


@pytest.mark.usefixtures("_fonts")
def test_a_section_that_is_whole_is_not_divided() -> None:
    filler = Section("filler", (Paragraph("word " * 400),))
    sign = Blanks(("Checked by", "Approved by"), ("name", "date"))
    whole = Section("signed", (Paragraph("said"), sign), whole=True)
    pages = laid_out([Section("contents", (Contents(),)), filler, whole], 600.0, 400.0)
    titles = pages_of_titles(pages)
    assert titles["signed"] == len(pages)


@pytest.mark.usefixtures("_fonts")
def test_no_line_breaks_between_a_number_and_its_unit() -> None:
    font = print_font(12)
    one = Text("applied 594 V", 1000.0, font, LIGHT.ink)
    assert one.lines == 1
    for width in range(20, 90):
        made = Text("applied 594 V", float(width), font, LIGHT.ink)
        assert "594\u00a0V" in made.text


@pytest.mark.usefixtures("_fonts")
def test_a_word_wider_than_its_column_is_broken() -> None:
    assert Text("W" * 200, 100.0, print_font(12), LIGHT.ink).lines > 10


@pytest.mark.usefixtures("_fonts")
def test_line_breaks_of_an_entry_are_kept() -> None:
    assert Text("one\ntwo\r\nthree", 500.0, print_font(12), LIGHT.ink).lines == 3


@pytest.mark.usefixtures("_fonts")
def test_a_text_too_long_for_its_line_is_shortened() -> None:
    assert elided("W" * 100, print_font(11), 100.0).endswith("…")
    assert elided("short", print_font(11), 100.0) == "short"


@pytest.mark.parametrize(
    ("value", "unit", "text"),
    [
        (None, "V", "–"),
        (-10.0, "C", "−10 °C"),
        (1.85185e-3, "s", "1.852 ms"),
        (0.0, "s", "0 s"),
    ],
)
def test_figures_have_four_digits_and_a_true_minus(value, unit, text) -> None:
    assert amount(value, unit) == text


def test_a_column_is_in_the_unit_of_its_largest_figure() -> None:
    assert in_one_unit((1.5e-3, 20e-6, None), "s") == ("ms", ["1.5", "0.02", "–"])
    assert in_one_unit((0.7274, 8.086), "A") == ("A", ["0.7274", "8.086"])
    assert in_one_unit((0.0, 0.0), "A") == ("A", ["0", "0"])
    assert percent(-56.54) == "−56.5 %"


def test_names_at_line_ends_move_apart_and_stay_within() -> None:
    assert spread([10.0, 50.0, 90.0], 11.0, 0.0, 100.0) == [10.0, 50.0, 90.0]
    assert spread([50.0, 50.0, 50.0], 11.0, 0.0, 100.0) == [50.0, 61.0, 72.0]
    assert spread([98.0, 99.0, 100.0], 11.0, 0.0, 100.0) == [78.0, 89.0, 100.0]
