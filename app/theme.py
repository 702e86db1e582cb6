"""Colours, type and line styles of the window, light and dark; nothing else sets a colour.

Within each set of colours (phases, verdicts) the least distance for normal, protan, deutan and
tritan vision is at least 15 (CIEDE2000); words and marks carry the meaning all the same.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path
from string import Template
from typing import Literal

from PySide6.QtCore import QObject, Qt, Signal
from PySide6.QtGui import QBrush, QColor, QFont, QFontDatabase, QPalette, QPen
from PySide6.QtWidgets import QApplication

from engine.checks import Verdict

ThemeChoice = Literal["system", "light", "dark"]

RESOURCES = Path(__file__).parent.parent / "resources"
FAMILY = "DejaVu Sans"

AXIS, TABLE, BODY, TITLE, REPORT_VERDICT = 11, 12, 13, 16, 20
"""Sizes of type in px: axes and units, entries and tables, body, page title, report's verdict."""
GRID = 4
GAPS = (4, 8, 12, 24)
NARROW_BELOW = 1280
"""Width of the window in px below which columns take their smaller sizes."""

LINE = 1.75
CURSOR_LINE = 1.5
PHASE_DASHES: tuple[tuple[float, ...], ...] = ((), (9.0, 3.5), (9.0, 3.0, 2.0, 3.0))
"""Dash and gap lengths in px for A, B, C; empty is a solid line."""


@dataclass(frozen=True, slots=True)
class Theme:
    """One set of colours by role."""

    name: Literal["light", "dark"]
    ground: QColor
    panel: QColor
    band: QColor
    shade: QColor
    ink: QColor
    second_ink: QColor
    stale: QColor
    rule: QColor
    field_edge: QColor
    accent: QColor
    """Also the focus and the cursor."""
    phase: tuple[QColor, QColor, QColor]
    verdict: Mapping[Verdict, QColor]


def _colours(text: str) -> list[QColor]:
    return [QColor(f"#{code}") for code in text.split()]


def _theme(name: Literal["light", "dark"], greys: str, phases: str, verdicts: str) -> Theme:
    """`greys` in the order of the fields from `ground` to `accent`."""
    ground, panel, band, shade, ink, second_ink, stale, rule, field_edge, accent = _colours(greys)
    a, b, c = _colours(phases)
    adequate, tight, undersized, not_assessed = _colours(verdicts)
    return Theme(
        name=name,
        ground=ground,
        panel=panel,
        band=band,
        shade=shade,
        ink=ink,
        second_ink=second_ink,
        stale=stale,
        rule=rule,
        field_edge=field_edge,
        accent=accent,
        phase=(a, b, c),
        verdict={
            "adequate": adequate,
            "tight": tight,
            "undersized": undersized,
            "not assessed": not_assessed,
        },
    )


LIGHT = _theme(
    "light",
    "F4F5F3 FFFFFF ECEEEB DDE1DC 1B2320 4F5954 5B635E C9CEC9 757D78 1F5673",
    phases="1B58D0 96370A 5C1A68",
    verdicts="1F6A8A 74610F 6E0C18 59625D",
)
DARK = _theme(
    "dark",
    "151A19 1D2423 232B2A 2E3837 E6EBE8 A9B3AF 98A29E 3A4442 828D8A 86BBDD",
    phases="2FA6F2 CC9450 DDB9D0",
    verdicts="2DB3D6 F2D53A F08A70 A3ADA9",
)


class ThemeSignals(QObject):
    """What paints with colours of its own repaints on `changed`."""

    changed = Signal()


theme_signals = ThemeSignals()
_current = LIGHT
_choice: ThemeChoice = "system"


def theme() -> Theme:
    """The theme in use."""
    return _current


def apply_theme(app: QApplication, choice: ThemeChoice) -> None:
    """Dress the whole application; may be called again at any time.

    'system' follows the scheme of the desktop, also when that changes later.
    """
    global _choice
    _choice = choice
    if app.property("themed") is None:
        app.setProperty("themed", True)
        app.setStyle("Fusion")
        load_fonts()
        app.setFont(font(BODY))
        app.styleHints().colorSchemeChanged.connect(lambda: _dress(app))
    _dress(app)


def _dress(app: QApplication) -> None:
    global _current
    _current = _wanted(app)
    app.setPalette(palette_of(_current))
    app.setStyleSheet(style_sheet_of(_current))
    theme_signals.changed.emit()


def _wanted(app: QApplication) -> Theme:
    scheme = app.styleHints().colorScheme()
    dark = scheme == Qt.ColorScheme.Dark if _choice == "system" else _choice == "dark"
    return DARK if dark else LIGHT


@lru_cache(maxsize=1)
def load_fonts() -> None:
    """Make the shipped fonts known to Qt; an application must exist."""
    for name in ("DejaVuSans.ttf", "DejaVuSans-Bold.ttf"):
        QFontDatabase.addApplicationFont(str(RESOURCES / "fonts" / name))


def font(size: int, bold: bool = False, italic: bool = False) -> QFont:
    """The shipped family, whose figures are all of one width."""
    made = QFont(FAMILY)
    made.setPixelSize(size)
    made.setBold(bold)
    made.setItalic(italic)
    return made


def style_sheet_of(look: Theme) -> str:
    """The style sheet with this theme's colours put in."""
    text = (RESOURCES / "style.qss").read_text(encoding="utf-8")
    roles = [name for name in Theme.__slots__ if name not in ("name", "phase", "verdict")]
    words = {role: getattr(look, role).name() for role in roles}
    words |= {f"phase_{name}": one.name() for name, one in zip("abc", look.phase, strict=True)}
    words["undersized"] = look.verdict["undersized"].name()
    words |= {"title": f"{TITLE}px", "table": f"{TABLE}px"}
    words |= {"name": look.name, "marks": (RESOURCES / "marks").as_posix()}
    return Template(text).substitute(words)


def palette_of(look: Theme) -> QPalette:
    """For everything that no style sheet rule dresses."""
    role = QPalette.ColorRole
    palette = QPalette(look.panel, look.ground)
    for roles, colour in (
        ((role.Window, role.Button), look.ground),
        ((role.Base, role.ToolTipBase, role.HighlightedText), look.panel),
        ((role.AlternateBase,), look.band),
        ((role.Text, role.WindowText, role.ButtonText, role.ToolTipText), look.ink),
        ((role.PlaceholderText,), look.stale),
        ((role.Highlight, role.Accent, role.Link, role.LinkVisited), look.accent),
        ((role.Light, role.Midlight, role.Mid), look.rule),
        ((role.Dark, role.Shadow), look.field_edge),
    ):
        for each in roles:
            palette.setColor(each, colour)
    for text in (role.Text, role.WindowText, role.ButtonText):
        palette.setColor(QPalette.ColorGroup.Disabled, text, look.stale)
    return palette


def line_pen(colour: QColor, width: float = LINE, dashes: tuple[float, ...] = ()) -> QPen:
    """A line that keeps its width at any scale; `dashes` in px."""
    pen = QPen(colour, width)
    pen.setCosmetic(True)
    pen.setJoinStyle(Qt.PenJoinStyle.BevelJoin)
    pen.setCapStyle(Qt.PenCapStyle.FlatCap)
    if dashes:
        pen.setDashPattern([length / width for length in dashes])
    return pen


def phase_pen(index: int, width: float = LINE) -> QPen:
    """The line of phase A, B or C (0, 1, 2), told apart by colour and dashes."""
    return line_pen(_current.phase[index], width, PHASE_DASHES[index])


def position_pen(width: float = LINE) -> QPen:
    """The line of the position looked at."""
    return line_pen(_current.ink, width)


def limit_pen() -> QPen:
    """The line of an allowed value."""
    return line_pen(_current.ink, 1.0, (1.0, 2.0))


def cursor_pen() -> QPen:
    return line_pen(_current.accent, CURSOR_LINE)


def dead_brush() -> QBrush:
    """Fills the dead interval."""
    return QBrush(_current.shade)


def freewheel_brush() -> QBrush:
    """Hatches the freewheel interval."""
    return QBrush(_current.field_edge, Qt.BrushStyle.BDiagPattern)


def overrun_brush() -> QBrush:
    """Hatches the overrun crosswise."""
    return QBrush(_current.field_edge, Qt.BrushStyle.DiagCrossPattern)
