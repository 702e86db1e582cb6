"""What the user may choose about a report."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import msgspec

from engine.checks import Assessment

PageSize = Literal["A4", "Letter"]


@dataclass(frozen=True, slots=True)
class ReportOptions:
    """Size of the paper, and whether the chosen candidate stands in the report alone."""

    paper: PageSize = "A4"
    only_chosen: bool = False


def reported(assessment: Assessment, options: ReportOptions) -> Assessment:
    """The assessment with the candidates that the report is about."""
    if not (options.only_chosen and assessment.chosen):
        return assessment
    kept = (result for result in assessment.candidates if result.name == assessment.chosen)
    return msgspec.structs.replace(assessment, candidates=tuple(kept))
