"""The duty in a report: every entry that is computed with, and which of them are assumed."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from app.entry_names import WITHOUT_FIELD, name_of
from app.report.blocks import Column, Paragraph, Row, Section, Table
from app.report.wording import amount
from engine.duty import as_triple, value_of
from engine.selection import GatePulse, Selection, entry

_COLUMNS = (
    Column("", 30),
    Column("low", 15, right=True),
    Column("nominal", 18, right=True),
    Column("high", 15, right=True),
    Column("", 22),
)
_BRANCHES = {"star": "A, B, C", "delta": "AB, BC, CA"}


def duty_section(selection: Selection) -> Section:
    """Supply, gating, load, cooling, overload cycle; low, nominal and high side by side."""
    rows = (
        *_document(selection),
        Row(("Supply",), strong=True),
        _levels(selection, "supply.voltage", "V"),
        _one(selection, "supply.loop_inductance_H", "H"),
        Row(("Gating",), strong=True),
        _one(selection, "gating.conduction_deg", "deg"),
        _levels(selection, "gating.frequency", "Hz"),
        _one(selection, "gating.blanking_s", "s"),
        _pulse(selection),
        _word(selection, "gating.soft_start"),
        Row(("Load",), strong=True),
        _word(selection, "load.connection"),
        _branches(selection, "load.resistance_ohm", "ohm"),
        _branches(selection, "load.inductance_H", "H"),
        _load_factor(selection),
        _word(selection, "feedback_diodes"),
        Row(("Cooling",), strong=True),
        _levels(selection, "cooling.ambient", "C"),
        _one(selection, "cooling.sink_K_per_W", "K/W"),
        _word(selection, "cooling.sink_serves"),
        _cycle(selection),
        Row(("Judged by",), strong=True),
        _rule_set(selection),
        *_not_acting(selection),
    )
    blocks = [Table(_COLUMNS, rows)]
    notes = selection.notes.strip()
    said = [Paragraph(f"Notes: {notes}")] if notes else []
    return Section("Duty", (*blocks, *said), new_page=True)


def _document(selection: Selection) -> Iterator[Row]:
    """The texts of the header in full."""
    named = ("title", "reference", "engineer")
    texts = [(name, str(getattr(selection, name))) for name in named]
    if any(text for _, text in texts):
        yield Row(("Document",), strong=True)
    yield from (Row((name,), instead=text) for name, text in texts if text)


def _marked(
    selection: Selection, key_of_column: dict[int, str], cells: Sequence[str], instead: str = ""
) -> Row:
    """A row whose values that nobody entered are marked, in words as well."""
    assumed = {at for at, key in key_of_column.items() if entry(selection, key) is None}
    assumed &= {at for at, key in key_of_column.items() if value_of(selection, key) is not None}
    names = [_COLUMNS[at].head for at in sorted(assumed)]
    of_which = f": {', '.join(names)}" if len(assumed) < len(key_of_column) else ""
    remark = f"assumed{of_which}" if assumed else ""
    if instead:
        return Row(tuple(cells), f"{instead} (assumed)" if assumed else instead)
    return Row((*cells, remark), assumed=frozenset(assumed))


def _levels(selection: Selection, stem: str, unit: str) -> Row:
    keys = {1: f"{stem}_low_{unit}", 2: f"{stem}_{unit}", 3: f"{stem}_high_{unit}"}
    values = [amount(value_of(selection, key), unit, 6) for key in keys.values()]
    return _marked(selection, keys, (name_of(keys[2]), *values))


def _one(selection: Selection, key: str, unit: str) -> Row:
    value = value_of(selection, key)
    told = "not given" if value is None else amount(value, unit, 6)
    return _marked(selection, {2: key}, (name_of(key), "", told, ""))


def _word(selection: Selection, key: str) -> Row:
    value = value_of(selection, key)
    told = {True: "yes", False: "no"}.get(value, str(value))
    return _marked(selection, {2: key}, (name_of(key), "", told, ""))


def _branches(selection: Selection, key: str, unit: str) -> Row:
    """One value where the branches are alike, else all three."""
    values = as_triple(value_of(selection, key))
    if len(set(values)) == 1:
        return _one(selection, key, unit)
    branches = _BRANCHES[value_of(selection, "load.connection")]
    told = ", ".join(amount(value, unit, 6) for value in values)
    return Row((name_of(key),), instead=f"{told}   ({branches})")


def _pulse(selection: Selection) -> Row:
    pulse: GatePulse = value_of(selection, "gating.pulse")
    if pulse.form == "block":
        return _word_row(selection, "gating.pulse", "block")
    parts: list[str] = [pulse.form]
    parts += [f"width {amount(pulse.width_s, 's', 6)}"] if pulse.width_s else []
    parts += [f"interval {amount(pulse.interval_s, 's', 6)}"] if pulse.interval_s else []
    return Row((name_of("gating.pulse"),), instead=", ".join(parts))


def _word_row(selection: Selection, key: str, told: str) -> Row:
    return _marked(selection, {2: key}, (name_of(key), "", told, ""))


def _load_factor(selection: Selection) -> Row:
    """At nominal it is 1 by definition."""
    keys = {1: "load.light_factor", 3: "load.overload_factor"}
    low, high = (f"× {value_of(selection, key):g}" for key in keys.values())
    return _marked(selection, keys, ("load factor", low, "× 1", high))


def _cycle(selection: Selection) -> Row:
    segments = value_of(selection, "overload_cycle")
    told = ", then ".join(
        f"{amount(each.duration_s, 's', 6)} at load × {each.load_factor:g}" for each in segments
    )
    return _marked(selection, {2: "overload_cycle"}, (name_of("overload_cycle"),), told)


def _rule_set(selection: Selection) -> Row:
    rule_set = value_of(selection, "rule_set")
    based_on = getattr(rule_set, "based_on", None)
    told = str(rule_set) if based_on is None else f"{based_on}, changed for this selection"
    return _marked(selection, {2: "rule_set"}, ("rule set",), told)


def _not_acting(selection: Selection) -> Iterator[Row]:
    """Entries that stand in the file but that nothing is computed with yet."""
    named = [name_of(key) for key in sorted(WITHOUT_FIELD) if entry(selection, key) is not None]
    if named:
        yield Row(("kept, not computed with",), instead=", ".join(named))
