"""Readable summaries for the terminal."""

from __future__ import annotations

from core import Comparison, RecordingReport
from core.comparison.judge import DECIDING
from core.notices import Notice
from core.recordings.leads import TWELVE_LEADS
from core.wording.caution import CAUTIONS, PLACEMENT_CAVEAT
from core.wording.judgements import MARKS, SHORT_NAMES, WORDS
from core.wording.notices import NOTICE_WORDS
from core.wording.numbers import plain, signed, signed_range
from core.wording.recordings import key_numbers, when_and_who


def comparison_summary(comparison: Comparison) -> str:
    """What a comparison found, line by line, cautions last."""
    overall = comparison.overall
    lines = [
        f"Earlier  {_recording_line(comparison.earlier)}",
        f"Later    {_recording_line(comparison.later)}",
        "",
        f"{MARKS[overall.judgement]} {overall.sentence}",
        overall.next_step,
        "",
        f"{'lead':<5}{'judgement':<24}{'measure':<9}{'earlier':>8}{'later':>8}{'change':>8}"
        f"   {'noise':<8}{'reach':<18}remainder (mV)",
    ]
    for lead, result in comparison.leads.items():
        first = f"{lead:<5}{MARKS[result.judgement]} {WORDS[result.judgement]:<22}"
        for name in DECIDING:
            m = result.measures[name]
            numbers = "".join(f"{signed(value):>8}" for value in (m.earlier, m.later, m.change))
            noise = "" if m.noise_high is None else f"±{m.noise_high:.2f}"
            lines.append(
                f"{first}{SHORT_NAMES[name]:<9}{numbers}   {noise:<8}"
                f"{signed_range(m.reach_low, m.reach_high):<18}{signed(m.remainder)}"
            )
            first = " " * len(first)
    lines += ["", "Later electrodes against the earlier, by the QRS (mm, 95 %):"]
    for electrode, shift in comparison.placement.electrodes.items():
        if shift is None:
            lines.append(f"{electrode:<5}not judged")
            continue
        directions = [
            f"{word} {signed(size.estimate, 0)} ({signed_range(size.low, size.high, 0)})"
            for word, size in (("up", shift.up_mm), ("left", shift.left_mm))
        ]
        lines.append(f"{electrode:<5}{directions[0]:<24}{directions[1]}")
    lines += ["", *_notice_lines(comparison.notices), PLACEMENT_CAVEAT, *CAUTIONS]
    return "\n".join(lines) + "\n"


def recording_summary(report: RecordingReport) -> str:
    """What a measurement found, line by line, cautions last."""
    lines = [
        _recording_line(report),
        "",
        f"{'lead':<6}"
        + "".join(f"{name:>8}" for name in ("J", "ST", "T", "R", "S", "Q", "P"))
        + "  (mV)   noise (µV)",
    ]
    values = report.values
    columns = [values[name] for name in ("j_mv", "st_mv", "t_mv", "r_mv", "s_mv")]
    columns += [report.q_mv, report.p_mv]
    for row, lead in enumerate(TWELVE_LEADS):
        numbers = [
            column[row] if report.quality[row].usable else float("nan") for column in columns
        ]
        cells = "".join(f"{signed(None if n != n else float(n)):>8}" for n in numbers)
        lines.append(f"{lead:<6}{cells}{plain(float(report.noise_uv[row])):>15}")
    further = report.to_dict()["further_measures"]
    for lead, numbers in further.items():
        told = (numbers[name] for name in ("j_mv", "st_mv", "t_mv", "r_mv", "s_mv"))
        lines.append(f"{lead:<6}" + "".join(f"{signed(number):>8}" for number in told))
    lines += ["", *_notice_lines(report.notices), *CAUTIONS]
    return "\n".join(lines) + "\n"


def _recording_line(report: RecordingReport) -> str:
    recording = report.recording
    return (
        f"{recording.source.name} · {when_and_who(recording.recorded_at, recording.subject.id)} · "
        f"{key_numbers(report.heart_rate_per_min, report.pr_ms, report.qrs_ms, report.qtc_ms)}"
    )


def _notice_lines(notices: tuple[Notice, ...]) -> list[str]:
    lines = [f"{NOTICE_WORDS[notice.severity]}: {notice.text}" for notice in notices]
    return [*lines, ""] if lines else []
