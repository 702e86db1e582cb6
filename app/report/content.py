"""A selection and its assessment as the sections of a report, in the order of reading."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

from app.cautions import cautions
from app.entry_names import name_of
from app.pages.check_pages import chosen_result, deciding_check
from app.report.blocks import Block, Figure, Paragraph, Row, Section, Table, plain_rows
from app.report.candidates import candidate_sections
from engine.checks import Assessment, Wanted
from engine.duty import REQUIRED, SAME_AS, USUAL, as_triple, value_of
from engine.quantities import printed, shown
from engine.rule_sets import Permitted, rule_set_of
from engine.selection import CycleSegment, GatePulse, Selection, entry
from engine.stress import BridgeStress, PositionStress

_METHODS = Path(__file__).parent.parent.parent / "resources" / "report" / "methods.txt"
_REOPEN = (
    "The selection travels with this report as the attached file selection.json: save it and "
    "open it with 'python3 -m app selection.json' to see, edit and compute everything anew. "
    "The results stand in results.json."
)


def sections_of(selection: Selection, assessment: Assessment) -> tuple[Section, ...]:
    """Every section of the report."""
    found = [
        _verdict(assessment),
        Section("Cautions", tuple(Paragraph(text) for text in cautions())),
        _duty(selection),
        Section(
            "Waveforms at the nominal point",
            (Figure("waveforms", 630, "One period at nominal voltage, frequency and load."),),
            new_page=True,
        ),
    ]
    if assessment.nominal is not None:
        found += _stresses(assessment.nominal)
    if assessment.candidates:
        found += candidate_sections(selection, assessment)
    else:
        found.append(_wanted(assessment.wanted))
    found += [_assumed(selection, assessment), _rules(selection), _methods(), _sign_off()]
    return tuple(found)


def _verdict(assessment: Assessment) -> Section:
    result = chosen_result(assessment)
    if result is None:
        text = "No candidate has been chosen."
        blocks: tuple[Block, ...] = (Paragraph(text, "verdict"), Paragraph(_REOPEN, "note"))
        return Section("Verdict", blocks)
    remark = f" ({result.remark})" if result.remark else ""
    basis = f" It rests at its weakest on {result.weakest_basis}." if result.weakest_basis else ""
    worst = deciding_check(result)
    why = f"{worst.rating}: {worst.how or worst.reason}." if worst is not None else ""
    return Section(
        "Verdict",
        (
            Paragraph(f"{result.name}: {result.verdict}", "verdict", result.verdict),
            Paragraph(f"Deciding row: {why}{basis}" if why else basis),
            *([Paragraph(f"Beside the verdict{remark}.")] if remark else []),
            Paragraph(_REOPEN, "note"),
        ),
    )


def _duty(selection: Selection) -> Section:
    rows = [_entry_row(selection, key) for key in _duty_keys()]
    return Section(
        "Duty",
        (
            Table(
                ("entry", "value", ""),
                tuple(row for row in rows if row is not None),
                "lrl",
                (40, 40, 20),
            ),
        ),
    )


def _duty_keys() -> list[str]:
    """Keys of the duty in the order of the file, extremes after their nominal value."""
    keys = [*REQUIRED, *SAME_AS, *USUAL, "cooling.sink_K_per_W", "supply.link_capacitance_F"]
    groups = ["supply", "gating", "load", "feedback_diodes", "on_state_drops", "cooling"]
    order = {name: place for place, name in enumerate([*groups, "overload_cycle", "rule_set"])}
    return sorted(keys, key=lambda key: order[key.split(".")[0]])


def _entry_row(selection: Selection, key: str) -> Row | None:
    if key.startswith("load.emf") or key in {"load.scaling", "supply.follows_frequency"}:
        return None
    value = value_of(selection, key)
    assumed = "assumed" if entry(selection, key) is None and value is not None else ""
    return Row((name_of(key), "not given" if value is None else _told(value, key), assumed))


def _told(value: object, key: str) -> str:
    """A value of the duty in words and units."""
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, tuple) and value and isinstance(value[0], CycleSegment):
        return "; ".join(f"{each.duration_s:g} s at load × {each.load_factor:g}" for each in value)
    if isinstance(value, GatePulse):
        return value.form if value.width_s is None else f"{value.form}, {shown(value.width_s, 's')}"
    if isinstance(value, tuple | float | int):
        unit = _unit_of(key)
        numbers = as_triple(value) if isinstance(value, tuple) else (float(value),)
        return ", ".join(shown(number, unit, 6) if unit else f"{number:g}" for number in numbers)
    return str(getattr(value, "based_on", value))


def _unit_of(key: str) -> str:
    last = key.split(".")[-1]
    for unit in ("K_per_W", "ohm", "deg", "Hz", "V", "H", "F", "s", "C"):
        if last.endswith("_" + unit):
            return unit
    return ""


def _stresses(nominal: BridgeStress) -> tuple[Section, ...]:
    switches = Table(
        ("switch", "average", "rms", "peak", "at gate-off", "forward", "reverse"),
        tuple(_switch_row(position) for position in nominal.positions),
        "lrrrrrr",
    )
    diodes = Table(
        ("diode", "average", "rms", "peak", "reverse"),
        tuple(_diode_row(position) for position in nominal.positions),
        "lrrrr",
    )
    turn_off = Table(
        ("switch", "turn-off", "dead interval", "freewheel", "overrun", "forward after", "at once"),
        tuple(_turn_off_row(position) for position in nominal.positions),
        "llrrrrr",
    )
    return (
        Section("The bridge at the nominal point", (_bridge_table(nominal),)),
        Section("Stress of the six positions at the nominal point", (switches, diodes), True),
        Section("Turn-off at the nominal point", (turn_off, *_turn_off_words(nominal))),
    )


def _turn_off_words(nominal: BridgeStress) -> Iterator[Block]:
    kinds = {position.turn_off for position in nominal.positions}
    if "forced" in kinds:
        yield Paragraph(
            "Forced: current flows at gate-off and forward voltage returns at once. A thyristor "
            "there needs a commutation circuit that holds it reversed; an IGBT turns off by "
            "itself."
        )
    if "natural" in kinds:
        yield Paragraph(
            "Natural: the current has ended before gate-off; 'forward after' is the time that "
            "the switch has before forward voltage returns."
        )


def _bridge_table(nominal: BridgeStress) -> Table:
    def three(values: tuple[float, float, float] | None, unit: str) -> str:
        if values is None:
            return "–"
        alike = max(values) - min(values) <= 1e-9 * max(map(abs, values))
        return ", ".join(_four(value, unit) for value in (values[:1] if alike else values))

    thd = [f"{100.0 * value:.1f}" for value in nominal.line_voltage_thd]
    rows = [
        ("line current, rms", three(nominal.line_current_rms_A, "A")),
        ("line current, peak", three(nominal.line_current_peak_A, "A")),
        ("line voltage, rms", three(nominal.line_voltage_rms_V, "V")),
        ("line voltage, fundamental rms", three(nominal.line_voltage_fundamental_rms_V, "V")),
        ("line voltage, THD", ", ".join(dict.fromkeys(thd)) + " %"),
        ("phase voltage, rms", three(nominal.phase_voltage_rms_V, "V")),
        ("load power", _four(nominal.load_power_W, "W")),
        (
            "link current: average, rms, ripple rms",
            ", ".join(
                _four(value, "A")
                for value in (
                    nominal.link_current_avg_A,
                    nominal.link_current_rms_A,
                    nominal.link_current_ripple_rms_A,
                )
            ),
        ),
    ]
    return Table(("bridge", ""), plain_rows(rows), "lr", (50, 50))


def _switch_row(position: PositionStress) -> Row:
    switch = position.switch
    return Row(
        (
            position.position,
            _four(switch.current_avg_A, "A"),
            _four(switch.current_rms_A, "A"),
            _four(switch.current_peak_A, "A"),
            _four(switch.gate_off_current_A, "A"),
            _four(switch.forward_blocking_peak_V, "V"),
            _four(switch.reverse_blocking_peak_V, "V"),
        )
    )


def _diode_row(position: PositionStress) -> Row:
    diode = position.diode
    return Row(
        (
            "D" + position.position[1:],
            _four(diode.current_avg_A, "A"),
            _four(diode.current_rms_A, "A"),
            _four(diode.current_peak_A, "A"),
            _four(diode.reverse_blocking_peak_V, "V"),
        )
    )


def _turn_off_row(position: PositionStress) -> Row:
    return Row(
        (
            position.position,
            position.turn_off,
            _four(position.dead_interval_s, "s"),
            _four(position.freewheel_s, "s"),
            _four(position.overrun_s, "s"),
            _four(position.forward_reapplied_s, "s"),
            _four(position.reapplied_step_V, "V"),
        )
    )


def _four(value: float | None, unit: str) -> str:
    return "–" if value is None else shown(value, unit, digits=4)


def _wanted(wanted: tuple[Wanted, ...]) -> Section:
    rows = [
        (
            each.rating,
            ("at most " if each.at_most else "at least ") + shown(each.value, each.unit, 4),
            "" if each.next_class is None else f"{each.next_class:g} {printed(each.unit)}",
            f"{each.corner.voltage_V:g} V, {each.corner.frequency_Hz:g} Hz, "
            f"load × {each.corner.load_factor:g}",
        )
        for each in wanted
    ]
    table = Table(("rating", "wanted", "next usual class", "corner"), plain_rows(rows), "lrrl")
    return Section("What the parts must at least stand", (table,))


def _assumed(selection: Selection, assessment: Assessment) -> Section:
    blocks = list(_assumed_blocks(selection, assessment))
    return Section("What is assumed or missing", tuple(blocks) or (Paragraph("Nothing."),))


def _assumed_blocks(selection: Selection, assessment: Assessment) -> Iterator[Block]:
    keys = [key for key in (*USUAL, *SAME_AS) if entry(selection, key) is None]
    names = [name_of(key) for key in keys if _entry_row(selection, key) is not None]
    if names:
        yield Paragraph("Assumed entries of the duty: " + ", ".join(names) + ".")
    for result in assessment.candidates:
        missing = [check.rating for check in result.checks if check.needs]
        if missing:
            listed = ", ".join(missing)
            yield Paragraph(f"{result.name}: not assessed for want of a rating: {listed}.")
    for warning in assessment.warnings:
        yield Paragraph(_sentence(warning.text))


def _sentence(text: str) -> str:
    return text[:1].upper() + text[1:] + ("" if text.endswith(".") else ".")


def _rules(selection: Selection) -> Section:
    rules = rule_set_of(selection)

    def rows(figures: dict[str, Permitted]) -> tuple[Row, ...]:
        return plain_rows([(key, f"{p.value:.4g}", p.source) for key, p in figures.items()])

    band = f"'{rules.name}'; a headroom under {rules.tight_band_pct:g} % is tight. {rules.note}"
    return Section(
        "Rule set",
        (
            Paragraph(band),
            Table(
                ("permitted fraction of", "", "source"),
                rows(dict(rules.fractions)),
                "lrl",
                (26, 10, 64),
            ),
            Table(("factor", "", "source"), rows(dict(rules.factors)), "lrl", (26, 10, 64)),
        ),
    )


def _methods() -> Section:
    blocks: list[Block] = []
    for part in _METHODS.read_text(encoding="utf-8").strip().split("\n\n"):
        title, _, text = part.partition("\n")
        blocks += [Paragraph(title, "heading"), Paragraph(text)]
    return Section("Methods, sources and limits of validity", tuple(blocks))


def _sign_off() -> Section:
    blank = "\u00a0" * 24
    rows = [(role, blank, blank, blank) for role in ("Selected by", "Checked by", "Approved by")]
    table = Table(("", "name", "date", "signature"), plain_rows(rows), "llll", (19, 27, 20, 34))
    return Section("Sign-off", (table,))
