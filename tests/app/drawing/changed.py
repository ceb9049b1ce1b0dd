"""Comparisons with something changed, so that pictures of them have to differ."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from core.comparison.results import Comparison
from core.recordings.leads import TWELVE_LEADS


def with_later(comparison: Comparison, lead: str, *, times: float = 1.0, plus_mv: float = 0.0):
    """Another later beat in one lead."""
    later = comparison.laid.later_mv.copy()
    row = TWELVE_LEADS.index(lead)
    later[row] = later[row] * times + plus_mv
    return replace(comparison, laid=replace(comparison.laid, later_mv=later))


def with_all_beats(comparison: Comparison, times: float) -> Comparison:
    """Both beats and their bands so many times as large in every lead."""
    laid, bands = comparison.laid, comparison.bands
    return replace(
        comparison,
        laid=replace(laid, earlier_mv=laid.earlier_mv * times, later_mv=laid.later_mv * times),
        bands=replace(
            bands,
            noise_mv=bands.noise_mv * times,
            reach_low_mv=bands.reach_low_mv * times,
            reach_high_mv=bands.reach_high_mv * times,
            expected_mv=bands.expected_mv * times,
        ),
    )


def without_later(comparison: Comparison, lead: str) -> Comparison:
    """No later sample known in one lead."""
    return with_later(comparison, lead, plus_mv=np.nan)


def with_judgement(comparison: Comparison, lead: str, judgement: str) -> Comparison:
    """Another judgement of one lead."""
    leads = dict(comparison.leads)
    leads[lead] = replace(leads[lead], judgement=judgement)
    return replace(comparison, leads=leads)
