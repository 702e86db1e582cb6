"""How far the load's voltages are from the figures that hold for a resistive load."""

from __future__ import annotations

from app.picture import Picture
from app.widgets.strip_scale import in_figures
from engine.ideal_figure import ideal_line_rms, ideal_phase_rms

LEAST_DIFFERENCE = 0.005
_ALIKE = 1e-6


def inductive_sentence(picture: Picture) -> str:
    """'' where the ideal figure holds, and where unlike branches make it no measure."""
    bridge = picture.state.bridge
    phases = picture.stress.phase_voltage_rms_V
    name, rms_V, fraction = (
        ("Phase rms", phases, ideal_phase_rms(bridge))
        if phases is not None
        else ("Line rms", picture.stress.line_voltage_rms_V, ideal_line_rms(bridge))
    )
    ideal_V = fraction * bridge.voltage_V
    if max(rms_V) - min(rms_V) > _ALIKE * ideal_V:
        return ""
    if abs(rms_V[0] - ideal_V) <= LEAST_DIFFERENCE * ideal_V:
        return ""
    return (
        f"{name} {in_figures(rms_V[0], 'V')}; with a resistive load {fraction:.3f} × "
        f"{in_figures(bridge.voltage_V, 'V')} = {in_figures(ideal_V, 'V')}. "
        "The inductive current flows on after gate-off."
    )
