"""The equal-loss average: worked examples of form factors, and its own equation."""

from __future__ import annotations

from math import pi, sqrt

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from engine.verdicts.average_current import (
    HALF_SINE_FORM,
    cooling_share,
    equal_loss_average,
    form_factor,
)


# P. S. Bimbhra, Power Electronics, Example 4.9, read in a transcription: 35 A rms are 22.282 A
# average of a half-sine.
def test_a_half_sine_has_the_form_factor_of_the_worked_example():
    assert pytest.approx(pi / 2) == HALF_SINE_FORM
    assert pytest.approx(22.282, abs=5e-4) == 35.0 / HALF_SINE_FORM


# The same, Example 4.10: blocks over 180°, 90° and 30° with 35 A rms have these averages.
# Without a threshold voltage equal loss is equal rms.
@pytest.mark.parametrize(("width_deg", "printed"), [(180, 24.749), (90, 17.5), (30, 10.104)])
def test_blocks_of_equal_rms_have_the_averages_of_the_worked_example(width_deg, printed):
    form = sqrt(360 / width_deg)
    found = equal_loss_average(0.0, 2e-3, form, 2e-3 * 35.0**2)
    assert found == pytest.approx(printed, abs=1e-3)


@given(st.floats(0.0, 5.0), st.floats(1e-6, 1.0), st.floats(1.0, 10.0), st.floats(1e-3, 1e5))
def test_the_average_causes_just_the_loss_it_was_computed_for(V0, r, form, loss_W):
    average = equal_loss_average(V0, r, form, loss_W)
    assert V0 * average + r * (form * average) ** 2 == pytest.approx(loss_W, rel=1e-9)


@given(st.floats(0.0, 5.0), st.floats(1e-6, 1.0), st.floats(1.0, 10.0), st.floats(1e-3, 1e5))
def test_a_more_peaky_wave_is_never_allowed_more(V0, r, form, loss_W):
    smooth = equal_loss_average(V0, r, form, loss_W)
    assert equal_loss_average(V0, r, 1.1 * form, loss_W) <= smooth * (1 + 1e-12)


def test_the_share_of_the_rated_loss_falls_from_the_rated_case_to_the_junctions_limit():
    found = cooling_share(np.array([[20.0, 85.0, 105.0, 125.0, np.inf]]), 85.0, 125.0)
    assert found.tolist() == [[1.0, 1.0, 0.5, 0.0, 0.0]]


def test_a_device_without_current_has_the_form_factor_of_direct_current():
    found = form_factor(np.array([0.0, 2.0, 0.5]), np.array([0.0, 3.0, 1.0]))
    assert found.tolist() == [1.0, 1.5, 2.0]
