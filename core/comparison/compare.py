"""Compare two recordings of one person.

The one function that window, command line, series and audit call.
"""

from __future__ import annotations

from collections.abc import Callable
from datetime import datetime

import numpy as np
from numpy.typing import NDArray

from core.comparison.bands import change_bands
from core.comparison.further import further_leads_of
from core.comparison.gate import pair_notices
from core.comparison.judge import (
    BACKED,
    BEYOND,
    DECIDING,
    NOT_JUDGED,
    STEADY,
    judge_lead,
    judge_pair,
)
from core.comparison.laid import lay_beats
from core.comparison.pairing import pair_beats
from core.comparison.put_right import put_right
from core.comparison.results import (
    NOTHING,
    Comparison,
    ElectrodeShift,
    LeadComparison,
    MeasureChange,
    Overall,
    Placement,
    ShiftRange,
)
from core.errors import NoTracing, Stopped
from core.json_numbers import number_or_none
from core.measures.lead_values import COMPARED
from core.measures.repeat_noise import repeat_noise
from core.measures.report import RecordingReport
from core.placement.checked import measure_and_check
from core.placement.estimate import ShiftPosterior, estimate_shifts
from core.placement.expected import Expected, expected_changes, tail_probability
from core.placement.foretell import INDEPENDENT_ROWS
from core.placement.moved import usable_independent, ventricular_beat_mv
from core.placement.person import Person, weigh_ensemble
from core.placement.reach import Reach, placement_reach
from core.recordings.leads import CHEST_LEADS, LIMB_LEADS, TWELVE_LEADS
from core.recordings.recording import Recording
from core.settings import Settings
from core.torso.ensemble import MODEL_NAME, load_ensemble
from core.wording import judgements as say

Progress = Callable[[float, str], None]
Numbers = dict[str, NDArray[np.float64]]


def compare(
    earlier: Recording,
    later: Recording,
    settings: Settings | None = None,
    *,
    report_progress: Progress | None = None,
    should_stop: Callable[[], bool] | None = None,
) -> Comparison:
    """Compare two 12-lead recordings of one person.

    Parameters
    ----------
    earlier, later : Recording
    settings : Settings, optional
    report_progress : callable, optional
        Called with the share done, 0 to 1, and a few words.
    should_stop : callable, optional
        Asked between steps; True ends the work with `Stopped`.

    Returns
    -------
    Comparison
        The same input and settings give the same numbers: chance comes from `Settings.seed`.

    Raises
    ------
    NotEnoughBeats
        If either recording has fewer than three usable beats of one kind.
    NoTracing
        If no lead can be used in both.
    NotComparable
        If a stop stands between the two that the settings don't lift.
    Stopped
        If `should_stop` said so.
    """
    settings = settings or Settings()

    def step(share: float, words: str) -> None:
        if should_stop is not None and should_stop():
            raise Stopped("The comparison was stopped before it was done.")
        if report_progress is not None:
            report_progress(share, words)

    rng = np.random.default_rng(settings.seed)
    step(0.0, "measuring the earlier recording")
    first = measure_and_check(earlier, settings)
    step(0.2, "measuring the later recording")
    second = measure_and_check(later, settings)
    step(0.4, "laying the beats on each other")
    first, second, chest_interchange = put_right(first, second, settings)
    notices = pair_notices(first, second, settings, chest_interchange)
    laid = lay_beats(first, second)
    pairs = pair_beats(first, second, laid)
    noise = repeat_noise(first, second, settings)

    step(0.5, "weighing the torso ensemble")
    usable = usable_independent(first.quality) & usable_independent(second.quality)
    if not usable.any():
        raise NoTracing(
            f"{earlier.source.name} and {later.source.name}: no lead holds a usable tracing in "
            "both. Record again with all electrodes well attached."
        )
    ensemble = load_ensemble()
    person = weigh_ensemble(
        ensemble, [ventricular_beat_mv(first), ventricular_beat_mv(second)], usable
    )
    step(0.6, "drawing electrode shifts")
    reach = placement_reach(person, first, noise, settings, rng)
    step(0.75, "estimating the shift from the QRS")
    shifts = estimate_shifts(
        person, laid.qrs_of(laid.earlier_mv), laid.qrs_of(laid.later_mv), settings
    )
    step(0.85, "foretelling ST and T")
    expected = expected_changes(person, first, shifts, noise, settings, rng)

    step(0.95, "judging")
    leads = {
        lead: _compare_lead(row, first, second, noise, reach, expected, shifts.get(lead), settings)
        for row, lead in enumerate(TWELVE_LEADS)
    }
    change = {name: second.values[name] - first.values[name] for name in COMPARED}
    rows = [row for row, ok in zip(INDEPENDENT_ROWS, usable, strict=True) if ok]
    placement = Placement(
        electrodes={
            lead: _shift_of(shifts[lead], settings.confidence)
            if leads[lead].judgement != NOT_JUDGED
            else None
            for lead in CHEST_LEADS
        },
        tail_probability=tail_probability(expected, change, DECIDING, rows),
        model_name=MODEL_NAME,
        model_version=ensemble.version,
        sites_mm=_mean_sites(person),
    )
    step(1.0, "done")
    return Comparison(
        settings=settings,
        made_at=datetime.now(),
        earlier=first,
        later=second,
        laid=laid,
        bands=change_bands(first, noise, reach, expected, settings),
        beat_pairs=pairs,
        leads=leads,
        further=further_leads_of(first, second, laid),
        placement=placement,
        overall=_overall(leads, placement),
        notices=notices,
    )


def _mean_sites(person: Person) -> dict[str, tuple[float, float]]:
    sites = person.ensemble.sites_mm[[variant.index for variant in person.variants]]
    mean = np.tensordot(person.weights, sites, axes=1)
    return {
        lead: (float(left), float(up)) for lead, (left, up) in zip(CHEST_LEADS, mean, strict=True)
    }


def _shift_of(posterior: ShiftPosterior, confidence: float) -> ElectrodeShift:
    return ElectrodeShift(
        up_mm=ShiftRange(*posterior.range_of(posterior.up_mm, confidence)),
        left_mm=ShiftRange(*posterior.range_of(posterior.left_mm, confidence)),
        qrs_points_to_shift=posterior.points_to_a_shift,
    )


def _compare_lead(
    row: int,
    first: RecordingReport,
    second: RecordingReport,
    noise: Numbers,
    reach: Reach,
    expected: Expected,
    shift: ShiftPosterior | None,
    settings: Settings,
) -> LeadComparison:
    unusable = [
        f"{which} tracing {report.quality[row].reason}"
        for which, report in (("earlier", first), ("later", second))
        if not report.quality[row].usable
    ]
    if unusable:
        return LeadComparison(
            dict.fromkeys(COMPARED, NOTHING),
            NOT_JUDGED,
            say.reason_not_judged(" and ".join(unusable)),
        )
    measures = {
        name: _measure_change(name, row, first, second, noise, reach, expected, settings)
        for name in COMPARED
    }
    points_to_shift = shift is not None and shift.points_to_a_shift
    code = judge_lead(measures, qrs_points_to_shift=points_to_shift)
    reason = _reason(code, TWELVE_LEADS[row], measures, points_to_shift=points_to_shift)
    return LeadComparison(measures, code, reason)


def _measure_change(
    name: str,
    row: int,
    first: RecordingReport,
    second: RecordingReport,
    noise: Numbers,
    reach: Reach,
    expected: Expected,
    settings: Settings,
) -> MeasureChange:
    before, after = float(first.values[name][row]), float(second.values[name][row])
    change = after - before
    foretold = float(expected.change[name][row])
    draws = expected.draws[name][row]
    draws = draws[~np.isnan(draws)]
    low = high = float("nan")
    if draws.size:
        tail = (1.0 - settings.confidence) / 2
        low, high = change - np.quantile(draws, [1.0 - tail, tail])
    half = float(noise[name][row])
    return MeasureChange(
        *(
            number_or_none(value)
            for value in (
                before,
                after,
                change,
                -half,
                half,
                reach.low[name][row],
                reach.high[name][row],
                foretold,
                change - foretold,
                low,
                high,
            )
        )
    )


def _deciding(measures: dict[str, MeasureChange]) -> list[say.Deciding]:
    """The deciding measures that could be compared, the most telling first."""
    found = []
    for name in DECIDING:
        m = measures[name]
        if m.change is None or m.noise_high is None:
            continue
        found.append(
            say.Deciding(
                name=say.SHORT_NAMES[name],
                change=m.change,
                noise=m.noise_high,
                reach_low=m.reach_low,
                reach_high=m.reach_high,
                expected=m.expected,
                remainder=m.remainder,
                remainder_low=m.remainder_low,
                remainder_high=m.remainder_high,
            )
        )
    return found


def _reason(
    code: str, lead: str, measures: dict[str, MeasureChange], *, points_to_shift: bool
) -> str:
    deciding = _deciding(measures)
    if code == NOT_JUDGED or not deciding:
        return say.reason_not_judged("neither ST nor T could be measured in both recordings")
    if code == STEADY:
        return say.reason_steady(deciding)
    if code == BEYOND:
        return say.reason_beyond(
            max(deciding, key=lambda m: _excess(m.change, m.reach_low, m.reach_high)),
            limb=lead in LIMB_LEADS,
        )
    most = max(deciding, key=lambda m: abs(m.change) / m.noise)
    if code != BACKED:
        most = max(deciding, key=lambda m: abs(m.remainder or 0.0) / m.noise)
    return say.reason_in_reach(most, backed=code == BACKED, points_to_shift=points_to_shift)


def _excess(change: float, low: float | None, high: float | None) -> float:
    """How far a change lies outside a range, as a share of the range's side."""
    side = high if change > 0 else low
    return abs(change) / max(abs(side or 0.0), 1e-9)


def _overall(leads: dict[str, LeadComparison], placement: Placement) -> Overall:
    changes: dict[str, dict[str, say.Deciding | None]] = {}
    for lead, comparison in leads.items():
        deciding = _deciding(comparison.measures)
        most = max(deciding, key=lambda m: abs(m.change) / m.noise, default=None)
        changes.setdefault(comparison.judgement, {})[lead] = most
    return Overall(
        judgement=judge_pair(changes),
        sentence=say.overall_sentence(changes, _shifts_worth_naming(placement)),
        next_step=say.next_step(changes),
    )


def _shifts_worth_naming(placement: Placement) -> list[say.ShiftWords]:
    return [
        say.ShiftWords(electrode, direction, size.estimate, size.low, size.high)
        for electrode, shift in placement.electrodes.items()
        if shift is not None
        for direction, size in shift.worth_naming().items()
    ]
