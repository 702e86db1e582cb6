"""What the load's voltages would be with a resistive load: the figures of the textbooks.

An inductive load makes them differ at conduction angles below 180°: a feedback diode carries
its current on after gate-off and holds the phase on a rail where it would otherwise float.
"""

from __future__ import annotations

from math import sqrt

from engine.bridge import Bridge


def ideal_phase_rms(bridge: Bridge) -> float:
    """rms of a balanced resistive star's phase voltage as a fraction of the link voltage.

    Of each 60° step three legs are gated for `conduction_deg` − 120°, less the blanking: the
    phases stand at V/3, V/3, −2V/3, a mean square of 2V²/9. For the rest two are: V/2, −V/2, 0,
    a mean square of V²/6. Where blanking leaves a window below 120°, one leg alone is gated in
    between and nothing flows. 1/√6 at 120° and √2/3 at 180° (M. D. Singh, K. B. Khanchandani,
    Power Electronics, 2nd ed., examples 9.17 and 9.12).
    """
    window_deg = bridge.conduction_deg - 360.0 * bridge.frequency_Hz * bridge.blanking_s
    three = max(0.0, window_deg - 120.0) / 60.0
    one = min(1.0, max(0.0, 120.0 - window_deg) / 60.0)
    return sqrt(three * 2.0 / 9.0 + (1.0 - three - one) / 6.0)


def ideal_line_rms(bridge: Bridge) -> float:
    """rms of the line voltage as a fraction of the link voltage: √3 times the phase's."""
    return sqrt(3.0) * ideal_phase_rms(bridge)
