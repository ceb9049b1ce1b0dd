"""What the gate says of rates, conduction, rhythm and pacing."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from core import Settings
from core.comparison.gate import pair_notices


@pytest.fixture
def report(steady):
    return steady.earlier


def notices(earlier, later):
    return {notice.code: notice for notice in pair_notices(earlier, later, Settings())}


def with_qrs_ms(report, qrs_ms: float):
    f = report.points.fiducials
    offset = f.qrs_onset + round(qrs_ms / report.step_ms)
    return replace(report, points=replace(report.points, fiducials=replace(f, qrs_offset=offset)))


def with_beats(report, intervals_s, *, p_wave: bool, why_not=None):
    """Beats at these intervals; those named by index are of another kind."""
    times = np.cumsum([0.5, *intervals_s])
    kinds = why_not or {}
    first = report.analysis.beats[0]
    beats = tuple(
        replace(first, r_time_s=float(t), used=i not in kinds, why_not=kinds.get(i))
        for i, t in enumerate(times)
    )
    f = report.points.fiducials
    if not p_wave:
        f = replace(f, p_onset=None, p_offset=None)
    return replace(
        report,
        analysis=replace(report.analysis, beats=beats),
        points=replace(report.points, fiducials=f),
    )


def with_spikes(report, n: int):
    return replace(report, analysis=replace(report.analysis, spikes=100 * np.arange(n)))


@pytest.mark.parametrize(("longer_ms", "told"), [(0, False), (20, False), (30, True), (-30, True)])
def test_a_qrs_of_another_length_is_said(report, longer_ms, told):
    one, other = with_qrs_ms(report, 84.0), with_qrs_ms(report, 84.0 + longer_ms)
    assert ("qrs-duration-differs" in notices(one, other)) == told


@pytest.mark.parametrize(
    ("earlier_ms", "later_ms", "which"),
    [(90, 130, "later"), (130, 90, "earlier"), (90, 118, None), (122, 150, None)],
)
def test_a_wide_qrs_in_one_recording_alone_is_said_of_that_one(report, earlier_ms, later_ms, which):
    found = notices(with_qrs_ms(report, earlier_ms), with_qrs_ms(report, later_ms))
    assert ("wide-qrs-in-one" in found) == (which is not None)
    if which:
        assert f"in the {which} recording alone" in found["wide-qrs-in-one"].text


SCATTERED = [0.5, 1.0, 0.6, 0.9, 0.45, 1.1, 0.7]
REGULAR = [0.80, 0.82, 0.79, 0.81, 0.80, 0.78, 0.82]


@pytest.mark.parametrize(
    ("intervals_s", "p_wave", "told"),
    [(SCATTERED, False, True), (SCATTERED, True, False), (REGULAR, False, False)],
)
def test_scattered_beats_without_a_p_wave_are_an_irregular_rhythm(
    report, intervals_s, p_wave, told
):
    other = with_beats(report, intervals_s, p_wave=p_wave)
    for pair, which in (((report, other), "Later"), ((other, report), "Earlier")):
        found = notices(*pair)
        assert ("irregular-rhythm" in found) == told
        if told:
            assert found["irregular-rhythm"].text.startswith(f"{which} recording")


def test_extra_beats_of_another_shape_are_no_irregular_rhythm(report):
    intervals = [0.8, 0.8, 0.4, 1.2, 0.8, 0.4, 1.2, 0.8]
    sinus = with_beats(
        report, intervals, p_wave=False, why_not={3: "another shape", 6: "another shape"}
    )
    assert "irregular-rhythm" not in notices(report, sinus)


def test_pacing_in_one_recording_alone_is_said_of_that_one(report):
    paced = with_spikes(report, 8)
    for pair, which in (((report, paced), "later"), ((paced, report), "earlier")):
        assert f"the {which} recording holds pacing" in notices(*pair)["paced-in-one"].text
    assert "paced-in-one" not in notices(paced, paced)
    assert "paced-in-one" not in notices(report, with_spikes(report, 1))  # a stray artefact
