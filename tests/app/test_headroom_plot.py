"""The plot of all headrooms."""

from __future__ import annotations

import msgspec
import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from app.widgets.headroom_plot import HeadroomPlot, headroom_rows
from app.widgets.sheet_delegate import headroom_text
from tests.app.assessments import BLOCKING, DEAD_INTERVAL, JUNCTION, WAITING, check, result

FIRST = msgspec.structs.replace(result("undersized", BLOCKING, JUNCTION, WAITING), name="first")
SECOND = result("tight", BLOCKING, DEAD_INTERVAL)


def test_rows_come_worst_first_and_those_not_assessed_are_left_out() -> None:
    rows = headroom_rows([FIRST, SECOND])
    assert [row.id for row in rows] == ["switch.Tvj", "switch.tq_dead", "switch.V_DRM"]
    assert rows[0].checks == (JUNCTION, None)


def test_a_row_that_fails_without_a_headroom_is_the_worst() -> None:
    runaway = check("diode.Tvj", "T_vj", "undersized", "C", reason="thermal runaway")
    assert headroom_rows([result("undersized", JUNCTION, runaway)])[0].id == "diode.Tvj"


@pytest.mark.parametrize(
    ("headroom_pct", "text"),
    [(34.4, "34"), (1.14, "1.1"), (-10.2, "−10"), (-0.01, "<0"), (0.0, "0.0"), (-1e5, "<−999")],
)
def test_headroom_is_written_short(headroom_pct: float, text: str) -> None:
    assert headroom_text(headroom_pct) == text


def shown_plot(qtbot: QtBot, *results: object) -> HeadroomPlot:
    plot = HeadroomPlot()
    qtbot.addWidget(plot)
    plot.show_results(results, "second", 10.0)  # type: ignore[arg-type]
    plot.resize(320, plot.height())
    return plot


def test_no_mark_lies_on_another(qtbot: QtBot) -> None:
    plot = shown_plot(qtbot, FIRST, SECOND)
    for number in range(3):
        rooms = [room for *_, room in plot._marks(number)]
        assert not any(a.intersects(b) for a in rooms for b in rooms if a is not b)
        assert all(room.left() >= 0 and room.right() <= plot.width() for room in rooms)


def test_a_click_on_a_mark_asks_for_its_rating(qtbot: QtBot) -> None:
    plot = shown_plot(qtbot, FIRST, SECOND)
    column, _, room = plot._marks(0)[0]
    with qtbot.waitSignal(plot.asked) as asked:
        qtbot.mouseClick(plot, Qt.MouseButton.LeftButton, pos=room.center().toPoint())
    assert asked.args == [column, "switch.Tvj"]


def test_the_plot_can_be_read_in_words(qtbot: QtBot) -> None:
    plot = shown_plot(qtbot, FIRST, SECOND)
    assert "T_vj: first −7.5 % undersized" in plot.accessibleDescription()
