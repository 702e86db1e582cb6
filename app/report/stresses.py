"""What the solved bridge puts on its parts at the nominal point: figures of the report."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence

from app.report.blocks import Block, Column, Figure, Paragraph, Row, Section, Table, plain_rows
from app.report.wording import NOTHING, amount, in_one_unit
from engine.duty import Duty
from engine.stress import BridgeStress, PositionStress
from engine.waveforms import Waveforms

_FIGURE_HEIGHT = 820.0

Getter = Callable[[PositionStress], float | None]


def waveform_section(waveforms: Waveforms, duty: Duty) -> Section:
    """One period at nominal voltage, frequency and load."""
    point = (
        f"One period of {amount(1.0 / duty.frequency_Hz.nominal, 's')} at "
        f"{amount(duty.voltage_V.nominal, 'V', 6)}, {amount(duty.frequency_Hz.nominal, 'Hz', 6)}, "
        "load × 1. T1's gate-on is 0°. Above: what conducts longest in each step. First lane: "
        "filled, the switch carries the current; outlined, its feedback diode does; thin line, it "
        "is gated. The current of position 1 counts positive in T1 and negative in D1; its dead "
        "interval is shaded."
    )
    figure = Figure(waveforms, duty.connection == "delta", _FIGURE_HEIGHT)
    return Section("Waveforms at the nominal point", (figure, Paragraph(point, "note")), True)


def bridge_section(nominal: BridgeStress, duty: Duty) -> Section:
    """Currents, voltages and power of the bridge as a whole."""
    rows = [
        _lines("line current, rms", nominal.line_current_rms_A, "A"),
        _lines("line current, peak", nominal.line_current_peak_A, "A"),
        _lines("line voltage, rms", nominal.line_voltage_rms_V, "V"),
        _lines("line voltage, fundamental rms", nominal.line_voltage_fundamental_rms_V, "V"),
        _distortion(nominal.line_voltage_thd),
    ]
    if duty.connection == "delta":
        rows.insert(2, _lines("branch current, rms", nominal.branch_current_rms_A, "A"))
    if nominal.phase_voltage_rms_V is not None:
        rows.append(_lines("phase voltage, rms", nominal.phase_voltage_rms_V, "V"))
    lines = Table(
        (Column("", 40), *(Column(head, 20, right=True) for head in ("A, AB", "B, BC", "C, CA"))),
        plain_rows(rows),
        whole=True,
    )
    return Section("The bridge at the nominal point", (lines, _link(nominal)))


def _lines(name: str, values: Sequence[float], unit: str) -> tuple[str, ...]:
    symbol, numbers = in_one_unit(values, unit)
    return (name, *(f"{number} {symbol}" for number in numbers))


def _distortion(shares: Sequence[float]) -> tuple[str, ...]:
    return ("line voltage, THD", *(f"{100.0 * share:.1f} %" for share in shares))


def _link(nominal: BridgeStress) -> Table:
    heads = ("link current, average", "rms", "ripple, rms", "link power", "load power")
    cells = (
        amount(nominal.link_current_avg_A, "A"),
        amount(nominal.link_current_rms_A, "A"),
        amount(nominal.link_current_ripple_rms_A, "A"),
        amount(nominal.link_power_W, "W"),
        amount(nominal.load_power_W, "W"),
    )
    columns = tuple(Column(head, 20, right=True) for head in heads)
    return Table(columns, (Row(cells),), whole=True)


def position_section(nominal: BridgeStress) -> Section:
    """Average, rms, peak and blocking voltage of all switches and diodes."""
    switches = _by_position(
        nominal,
        "T",
        ("average", "A", lambda p: p.switch.current_avg_A),
        ("rms", "A", lambda p: p.switch.current_rms_A),
        ("peak", "A", lambda p: p.switch.current_peak_A),
        ("at gate-off", "A", lambda p: p.switch.gate_off_current_A),
        ("forward peak", "V", lambda p: p.switch.forward_blocking_peak_V),
        ("reverse peak", "V", lambda p: p.switch.reverse_blocking_peak_V),
    )
    diodes = _by_position(
        nominal,
        "D",
        ("average", "A", lambda p: p.diode.current_avg_A),
        ("rms", "A", lambda p: p.diode.current_rms_A),
        ("peak", "A", lambda p: p.diode.current_peak_A),
        ("", "", None),
        ("", "", None),
        ("reverse peak", "V", lambda p: p.diode.reverse_blocking_peak_V),
    )
    return Section("Stress of the six positions at the nominal point", (switches, diodes))


def turn_off_section(nominal: BridgeStress) -> Section:
    """How each position turns off, and the intervals after its gate-off."""
    table = _by_position(
        nominal,
        "T",
        ("at gate-off", "A", lambda p: p.switch.gate_off_current_A),
        ("dead interval", "s", lambda p: p.dead_interval_s),
        ("freewheel", "s", lambda p: p.freewheel_s),
        ("overrun", "s", lambda p: p.overrun_s),
        ("reversed for", "s", _reversed_for),
        ("forward at once", "V", lambda p: p.reapplied_step_V),
        words=("turn-off", lambda p: p.turn_off),
    )
    said = tuple(_words(nominal))
    return Section("Turn-off at the nominal point", (table, *said))


def _reversed_for(position: PositionStress) -> float | None:
    return position.forward_reapplied_s if position.turn_off == "natural" else None


def _words(nominal: BridgeStress) -> Iterator[Block]:
    kinds = {position.turn_off for position in nominal.positions}
    if "forced" in kinds:
        yield Paragraph(
            "Forced: current flows at gate-off, and forward voltage stands on the switch at once. "
            "A thyristor there needs a commutation circuit that holds it reversed for k·t_q; an "
            "IGBT turns off by itself."
        )
    if "natural" in kinds:
        yield Paragraph(
            "Natural: the current has ended before gate-off, and the feedback diode holds the "
            "switch reversed for the time given."
        )
    if "idle" in kinds:
        yield Paragraph("Idle: the switch carries no current in this period.")
    if any(position.overrun_s > 0.0 for position in nominal.positions):
        yield Paragraph(
            "Overrun: until it ends, the incoming switch of the leg cannot take the current; its "
            "gate pulse must outlast that."
        )
    yield Paragraph("The rows on turn-off stand among each candidate's checks.", "note")


def _by_position(
    nominal: BridgeStress,
    letter: str,
    *figures: tuple[str, str, Getter | None],
    words: tuple[str, Callable[[PositionStress], str]] | None = None,
) -> Table:
    """A row each position, a column each figure, its unit in the head."""
    names = [letter + position.position[1:] for position in nominal.positions]
    columns = [Column("switch" if letter == "T" else "diode", 10)]
    cells: list[list[str]] = [names]
    if words is not None:
        columns.append(Column(words[0], 11))
        cells.append([words[1](position) for position in nominal.positions])
    for head, unit, of in figures:
        values = [of(position) for position in nominal.positions] if of else []
        symbol, numbers = in_one_unit(values, unit) if of else ("", [""] * len(names))
        empty = not of or set(numbers) == {NOTHING}
        columns.append(Column(head if empty else f"{head}\n{symbol}", 15, right=True))
        cells.append(numbers)
    return Table(tuple(columns), plain_rows(zip(*cells, strict=True)), whole=True)
