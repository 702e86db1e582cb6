"""The rule set: chosen, and some of its figures replaced for this selection."""

from __future__ import annotations

import pytest
from PySide6.QtWidgets import QToolButton

from app.open_selection import OpenSelection
from app.pages.duty_entries import DutyEntries
from engine.rule_sets import BUILT_IN
from engine.selection import RuleSetChange, with_entry
from tests.app.assessments import SELECTION
from tests.app.duty_column import (
    number,
    open_figures,
    rules,
    type_into,
)

pytest_plugins = ("tests.app.duty_fixtures",)


def test_another_rule_set_can_be_chosen(entries: DutyEntries, document: OpenSelection) -> None:
    other = list(BUILT_IN)[-1]
    menu = rules(entries).findChild(QToolButton).menu()
    next(action for action in menu.actions() if action.text() == other).trigger()
    assert document.selection.rule_set == other


def test_figures_of_the_rule_set_may_be_replaced_and_given_back(
    entries: DutyEntries, document: OpenSelection
) -> None:
    open_figures(entries)
    usual = BUILT_IN["common practice"]
    field = number(entries, "rule_set.fractions.switch.V_DRM")
    assert float(field.text()) == usual.fractions["switch.V_DRM"].value
    type_into(field, "0.55")
    type_into(number(entries, "rule_set.tight_band_pct"), "5")
    assert document.selection.rule_set == RuleSetChange(
        based_on="common practice", tight_band_pct=5.0, fractions={"switch.V_DRM": 0.55}
    )
    type_into(field, "")
    type_into(number(entries, "rule_set.tight_band_pct"), "10")
    assert document.selection.rule_set == "common practice"
    assert float(field.text()) == usual.fractions["switch.V_DRM"].value


@pytest.mark.parametrize(
    ("key", "text"),
    [
        ("rule_set.fractions.switch.V_DRM", "0"),
        ("rule_set.fractions.switch.V_DRM", "11"),
        ("rule_set.factors.tq", "-1"),
        ("rule_set.tight_band_pct", "100"),
    ],
)
def test_figure_out_of_range_is_refused(
    entries: DutyEntries, document: OpenSelection, key: str, text: str
) -> None:
    open_figures(entries)
    field = number(entries, key)
    field.setText(text)
    field.textEdited.emit(text)
    assert document.selection.rule_set is None
    assert key in document.refusals


def test_changed_figures_stand_open_when_the_document_has_some(
    entries: DutyEntries, document: OpenSelection
) -> None:
    change = RuleSetChange(based_on="common practice", factors={"tq": 2.0})
    document.open(with_entry(SELECTION, "rule_set", change), None)
    assert number(entries, "rule_set.factors.tq").text() == "2"
