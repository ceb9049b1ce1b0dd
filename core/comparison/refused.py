"""The JSON of a comparison that could not be made: complete in form, its numbers null."""

from __future__ import annotations

from datetime import datetime
from typing import Any

from core.comparison.judge import NOT_JUDGED
from core.comparison.results import NOTHING, LeadComparison, Overall, Placement, head
from core.errors import ComparisonError, NotComparable
from core.measures.lead_values import COMPARED
from core.measures.report import describe
from core.notices import Notice
from core.recordings.leads import CHEST_LEADS, TWELVE_LEADS
from core.recordings.recording import Recording
from core.settings import Settings
from core.torso.ensemble import MODEL_NAME, load_ensemble
from core.wording import judgements as say
from core.wording.caution import CAUTIONS, PLACEMENT_CAVEAT


def refused_comparison(
    earlier: Recording, later: Recording, settings: Settings, error: ComparisonError
) -> dict[str, Any]:
    """What `Comparison.to_dict` would give, with the reason in place of the numbers."""
    reason = str(error)
    notices: tuple[Notice, ...] = (Notice("not-comparable", "stop", reason),)
    if isinstance(error, NotComparable):
        notices = error.notices
    lead = LeadComparison(
        dict.fromkeys(COMPARED, NOTHING), NOT_JUDGED, say.reason_not_judged("see the notice")
    )
    placement = Placement(
        electrodes=dict.fromkeys(CHEST_LEADS),
        tail_probability=None,
        model_name=MODEL_NAME,
        model_version=load_ensemble().version,
    )
    return head(settings, datetime.now()) | {
        "earlier": describe(earlier),
        "later": describe(later),
        "beat_pairs": [],
        "leads": {name: lead.to_dict() for name in TWELVE_LEADS},
        "placement": placement.to_dict(),
        "overall": Overall(NOT_JUDGED, reason, say.next_step({})).to_dict(),
        "notices": [notice.to_dict() for notice in notices],
        "caveat": PLACEMENT_CAVEAT,
        "cautions": list(CAUTIONS),
    }
