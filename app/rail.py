"""The pages by name, each with the worst verdict of the checks that belong to it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from PySide6.QtCore import QPoint, QRect, QRectF, QSize, Qt, Signal
from PySide6.QtGui import QKeyEvent, QPainter, QPaintEvent
from PySide6.QtWidgets import QAbstractButton, QButtonGroup, QVBoxLayout, QWidget

from app.entry_names import assumed_entries
from app.pages.check_pages import DUTY, REPORT, chosen_result, missing_count, worst_by_page
from app.picture import Picture, Problem
from app.theme import AXIS, BODY, font, theme
from app.widgets.verdict_mark import SIZE, draw_verdict_mark
from app.widgets.window_width import WindowWidth
from engine.checks import Verdict
from engine.selection import Selection

WIDTH, NARROW_WIDTH = 136, 116
ITEM_HEIGHT = 52
LINE_HEIGHT = 14
MARGIN = 12
BAR_WIDTH = 4


@dataclass(frozen=True, slots=True)
class PageStanding:
    """What stands below a page's name: a verdict by mark and word, or lines of words alone."""

    verdict: Verdict | None = None
    words: str = ""

    @property
    def text(self) -> str:
        return self.verdict or self.words


class Rail(QWidget):
    """A column of pages; Up and Down go through them."""

    page_chosen = Signal(str)

    def __init__(self, titles: Sequence[str]) -> None:
        super().__init__()
        self.setAccessibleName("Pages")
        self.setFixedWidth(WIDTH)
        self._items = {title: RailItem(title) for title in titles}
        self._group = QButtonGroup(self)
        WindowWidth(self, self._fit)
        layout = QVBoxLayout(self)
        layout.setContentsMargins(0, 8, 0, 8)
        layout.setSpacing(0)
        for item in self._items.values():
            self._group.addButton(item)
            layout.addWidget(item)
            item.clicked.connect(lambda _=False, title=item.title: self.page_chosen.emit(title))
        layout.addStretch(1)

    def set_current(self, title: str) -> None:
        self._items[title].setChecked(True)

    def standing(self, title: str) -> PageStanding:
        """What the rail says of a page."""
        return self._items[title].standing

    def show_picture(self, picture: Picture) -> None:
        result = chosen_result(picture.assessment)
        worst = worst_by_page(result, self._items) if result is not None else {}
        for title, item in self._items.items():
            item.set_standing(PageStanding(worst.get(title)))
        missing = missing_count(result)
        self._set(REPORT, PageStanding(words=_counted(picture.selection, missing)))

    def show_stale(self, problems: tuple[Problem, ...]) -> None:
        for item in self._items.values():
            item.set_standing(PageStanding(words="stale"))
        at_entries = sum(bool(problem.key) for problem in problems)
        if at_entries:
            faults = "1 fault" if at_entries == 1 else f"{at_entries} faults"
            self._set(DUTY, PageStanding(words=faults))

    def show_incomplete(self, missing: tuple[str, ...]) -> None:
        for item in self._items.values():
            item.set_standing(PageStanding())
        self._set(DUTY, PageStanding(words=f"{len(missing)} needed" if missing else ""))

    def _set(self, title: str, standing: PageStanding) -> None:
        if title in self._items:
            self._items[title].set_standing(standing)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        step = {Qt.Key.Key_Up: -1, Qt.Key.Key_Down: 1}.get(Qt.Key(event.key()), 0)
        items = list(self._items.values())
        here = next((i for i, item in enumerate(items) if item.hasFocus()), -1)
        if step and 0 <= here + step < len(items):
            items[here + step].setFocus(Qt.FocusReason.TabFocusReason)
            items[here + step].click()
        elif not step:
            super().keyPressEvent(event)

    def _fit(self, narrow: bool) -> None:
        self.setFixedWidth(NARROW_WIDTH if narrow else WIDTH)

    def paintEvent(self, event: QPaintEvent) -> None:
        painter = QPainter(self)
        painter.fillRect(self.width() - 1, 0, 1, self.height(), theme().rule)


class RailItem(QAbstractButton):
    """A page's name, and below it where the page stands."""

    def __init__(self, title: str) -> None:
        super().__init__()
        self.title = title
        self.standing = PageStanding()
        self.setCheckable(True)
        self.setFixedHeight(ITEM_HEIGHT + LINE_HEIGHT * (title == REPORT))
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setAccessibleName(title)
        self.toggled.connect(lambda: self.update())

    def set_standing(self, standing: PageStanding) -> None:
        if standing != self.standing:
            self.standing = standing
            said = (self.title, *standing.text.splitlines())
            self.setAccessibleName(", ".join(said))
            self.update()

    def sizeHint(self) -> QSize:
        return QSize(WIDTH, self.height())

    def keyPressEvent(self, event: QKeyEvent) -> None:
        if event.key() in (Qt.Key.Key_Up, Qt.Key.Key_Down):
            event.ignore()
        else:
            super().keyPressEvent(event)

    def paintEvent(self, event: QPaintEvent) -> None:
        painter = QPainter(self)
        self._paint_ground(painter)
        painter.setFont(font(BODY, bold=self.isChecked()))
        painter.setPen(theme().ink)
        painter.drawText(QPoint(MARGIN, 22), self.title)
        self._paint_standing(painter)

    def _paint_ground(self, painter: QPainter) -> None:
        if self.isChecked():
            painter.fillRect(0, 0, self.width() - 1, self.height(), theme().shade)
            painter.fillRect(0, 0, BAR_WIDTH, self.height(), theme().accent)
        elif self.underMouse():
            painter.fillRect(0, 0, self.width() - 1, self.height(), theme().band)
        if self.hasFocus():
            painter.setPen(theme().accent)
            painter.drawRect(QRect(0, 0, self.width() - 2, self.height() - 1))

    def _paint_standing(self, painter: QPainter) -> None:
        verdict, left = self.standing.verdict, MARGIN
        painter.setFont(font(AXIS))
        painter.setPen(theme().second_ink)
        if verdict is not None:
            draw_verdict_mark(painter, QRectF(MARGIN, 29, SIZE, SIZE), verdict)
            painter.setPen(theme().verdict[verdict])
            left += SIZE + 6
        for index, line in enumerate(self.standing.text.splitlines()):
            painter.drawText(QPoint(left, 41 + index * LINE_HEIGHT), line)


def _counted(selection: Selection, missing: int) -> str:
    parts = [f"{missing} missing"] if missing else []
    assumed = len(assumed_entries(selection))
    return "\n".join([*parts, *([f"{assumed} assumed"] if assumed else [])])
