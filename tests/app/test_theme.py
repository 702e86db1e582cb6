"""Both themes can be read, are the ones specified, and change while the window is open."""

from __future__ import annotations

import pytest
from PySide6.QtGui import QColor, QFontInfo, QFontMetrics
from PySide6.QtWidgets import QApplication, QLineEdit

from app.theme import (
    BODY,
    DARK,
    FAMILY,
    LIGHT,
    PHASE_DASHES,
    TABLE,
    Theme,
    apply_theme,
    font,
    phase_pen,
    theme,
    theme_signals,
)

THEMES = pytest.mark.parametrize("look", [LIGHT, DARK], ids=lambda look: look.name)


def luminance(colour: QColor) -> float:
    """Relative luminance (WCAG 2.1, definition of terms)."""
    linear = [
        c / 12.92 if c <= 0.03928 else ((c + 0.055) / 1.055) ** 2.4
        for c in (colour.redF(), colour.greenF(), colour.blueF())
    ]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]


def contrast(one: QColor, other: QColor) -> float:
    """Contrast ratio (WCAG 2.1, definition of terms)."""
    lighter, darker = sorted((luminance(one), luminance(other)), reverse=True)
    return (lighter + 0.05) / (darker + 0.05)


def lowest_contrast(look: Theme, colour: QColor) -> float:
    return min(contrast(colour, on) for on in (look.ground, look.panel, look.band, look.shade))


@THEMES
def test_every_text_and_line_colour_reaches_4_5_on_every_ground(look: Theme) -> None:
    """WCAG 2.1, success criterion 1.4.3 (level AA)."""
    texts = [look.ink, look.second_ink, look.stale, look.accent, *look.phase]
    for colour in (*texts, *look.verdict.values()):
        assert lowest_contrast(look, colour) >= 4.5, colour.name()


@THEMES
def test_field_edges_reach_3_on_every_ground(look: Theme) -> None:
    """WCAG 2.1, success criterion 1.4.11 (level AA)."""
    assert lowest_contrast(look, look.field_edge) >= 3.0


@THEMES
def test_selected_text_can_be_read(look: Theme) -> None:
    assert contrast(look.panel, look.accent) >= 4.5


def test_contrast_ratio_of_black_on_white_is_21() -> None:
    """WCAG 2.1: the range of the ratio is 1 to 21."""
    assert contrast(QColor("black"), QColor("white")) == pytest.approx(21.0)


def test_theme_changes_at_once_and_says_so(qapp: QApplication, qtbot) -> None:
    apply_theme(qapp, "light")
    with qtbot.waitSignal(theme_signals.changed):
        apply_theme(qapp, "dark")
    assert theme() is DARK
    assert qapp.palette().window().color() == DARK.ground
    apply_theme(qapp, "light")
    assert qapp.palette().window().color() == LIGHT.ground


def test_widget_in_view_takes_the_new_colours(qapp: QApplication, qtbot) -> None:
    apply_theme(qapp, "light")
    field = QLineEdit()
    qtbot.addWidget(field)
    field.resize(60, 24)
    field.show()
    before = field.grab().toImage().pixelColor(4, 4)
    apply_theme(qapp, "dark")
    after = field.grab().toImage().pixelColor(4, 4)
    apply_theme(qapp, "light")
    assert (before, after) == (LIGHT.panel, DARK.panel)


def test_shipped_family_is_in_use_and_its_figures_are_of_one_width(qapp: QApplication) -> None:
    apply_theme(qapp, "light")
    for bold in (False, True):
        made = font(BODY, bold=bold)
        assert QFontInfo(made).family() == FAMILY
        assert len({QFontMetrics(made).horizontalAdvance(figure) for figure in "0123456789"}) == 1


def test_dashes_keep_their_length_in_pixels_at_every_line_width(qapp: QApplication) -> None:
    for width in (1.0, 1.75):
        for index, dashes in enumerate(PHASE_DASHES):
            pen = phase_pen(index, width)
            drawn = [length * width for length in pen.dashPattern()]
            assert drawn == pytest.approx(list(dashes))


def test_entries_are_set_in_the_size_of_tables(qapp: QApplication, qtbot) -> None:
    apply_theme(qapp, "light")
    field = QLineEdit()
    qtbot.addWidget(field)
    field.show()
    assert field.font().pixelSize() == TABLE
