"""Bridges drawn at random over the whole range of the engine, the same ones for a given seed."""

from __future__ import annotations

from random import Random
from typing import Literal

from engine.bridge import Bridge
from engine.duty import Triple


def random_bridge(
    random: Random, *, inductive: bool = False, longest_periods: float = 2.0
) -> Bridge:
    """Star or delta, any conduction angle and blanking, balanced or not, some L = 0.

    L/R lies between 0.003 and `longest_periods` periods, before branches are made to differ.
    `inductive` leaves out branches without inductance or without resistance.
    """
    frequency_Hz = 10.0 ** random.uniform(0.0, 2.7)
    connection: Literal["star", "delta"] = random.choice(["star", "delta"])
    conduction_deg = random.choice([120.0, 150.0, 180.0, random.uniform(120.0, 180.0)])
    R, L = _branches(random, frequency_Hz, longest_periods)
    if not inductive:
        R, L = _some_without(random, connection, R, L)
    return Bridge(
        voltage_V=10.0 ** random.uniform(1.0, 3.5),
        frequency_Hz=frequency_Hz,
        conduction_deg=conduction_deg,
        connection=connection,
        resistance_ohm=_triple(R),
        inductance_H=_triple(L),
        blanking_s=_blanking_deg(random, conduction_deg) / 360.0 / frequency_Hz,
    )


def _branches(
    random: Random, frequency_Hz: float, longest: float
) -> tuple[list[float], list[float]]:
    R = [10.0 ** random.uniform(-1.0, 2.0)] * 3
    time_constant = longest * (0.003 / longest) ** random.random() / frequency_Hz
    L = [R[0] * time_constant] * 3
    if random.random() < 0.6:
        R = [r * 10.0 ** random.uniform(-1.0, 1.0) for r in R]
    if random.random() < 0.6:
        L = [value * 10.0 ** random.uniform(-1.0, 1.0) for value in L]
    return R, L


def _some_without(
    random: Random, connection: str, R: list[float], L: list[float]
) -> tuple[list[float], list[float]]:
    R, L = list(R), list(L)
    if random.random() < 0.4:
        for branch in random.sample(range(3), random.choice([1, 2, 3])):
            L[branch] = 0.0
    inductive = [branch for branch in range(3) if L[branch]]
    if connection == "star" and inductive and random.random() < 0.1:
        R[random.choice(inductive)] = 0.0
    return R, L


def _blanking_deg(random: Random, conduction_deg: float) -> float:
    usual = random.uniform(0.0, conduction_deg - 60.0)
    long = random.uniform(0.0, 0.9 * conduction_deg)
    return random.choice([0.0, 0.0, usual, long])


def _triple(values: list[float]) -> Triple:
    return values[0], values[1], values[2]
