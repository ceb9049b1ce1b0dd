"""Notices, worded once for window, PDF, terminal and JSON."""

from __future__ import annotations

from collections.abc import Sequence

from core.notices import Notice
from core.wording.lists import joined, named
from core.wording.numbers import clock, lasting

NOTICE_WORDS = {"stop": "Stop", "caution": "Caution", "info": "Note"}


def limb_leads_derived(derived: Sequence[str]) -> Notice:
    """Some limb leads were computed, not recorded."""
    return Notice(
        "limb-leads-derived",
        "info",
        f"{joined(derived)} not in the file; computed from two recorded limb leads.",
    )


def stretch_chosen(start_s: float, length_s: float, duration_s: float) -> Notice:
    """Ten seconds of a long recording were taken."""
    return Notice(
        "stretch-chosen",
        "info",
        f"The recording lasts {lasting(duration_s)}; its cleanest {length_s:.0f} s are used, "
        f"from {clock(start_s)} (h:min:s) on.",
    )


def stretch_asked(start_s: float, stop_s: float, duration_s: float) -> Notice:
    """The reader chose a stretch of a recording."""
    return Notice(
        "stretch-asked",
        "info",
        f"The recording lasts {lasting(duration_s)}; as chosen, only {clock(start_s)} "
        f"to {clock(stop_s)} (h:min:s) is used.",
    )


def stated_by_user(facts: Sequence[str]) -> Notice:
    """A table leaves out its unit or its rate."""
    return Notice(
        "stated-by-user",
        "info",
        f"Not in the file, but stated by the user: {joined(facts)}. What is measured is right only "
        "if that is.",
    )


def beats_left_out(reasons: Sequence[str], n_beats: int) -> Notice:
    """Some beats are not in the representative beat."""
    counted = [f"{reasons.count(reason)} {reason}" for reason in dict.fromkeys(reasons)]
    return Notice(
        "beats-left-out",
        "info",
        f"{len(reasons)} of {n_beats} beats left out of the representative beat: "
        f"{joined(counted)}.",
    )


def leads_unusable(unusable: Sequence[tuple[str, str | None]]) -> Notice:
    """Some leads hold no usable tracing."""
    named = [f"{lead} ({reason})" for lead, reason in unusable]
    return Notice(
        "leads-unusable",
        "caution",
        f"No usable tracing in {joined(named)}. Check the electrodes and record again.",
    )


def leads_disturbed(faults: Sequence[tuple[str, str, float]]) -> Notice:
    """Hum, noise, wander or steps in some leads: kind, lead and size in mV."""
    told = []
    for kind in dict.fromkeys(kind for kind, _, _ in faults):
        leads = [lead for other, lead, _ in faults if other == kind]
        largest = max(size for other, _, size in faults if other == kind)
        told.append(f"{kind} up to {largest:.2f} mV in {named(leads)}")
    sentence = "; ".join(told)
    return Notice(
        "leads-disturbed",
        "info",
        f"{sentence[0].upper()}{sentence[1:]}. Hum and wander are taken out, and repeat noise is "
        "wider where beats differ; a quieter recording tells more.",
    )


def no_p_wave() -> Notice:
    """No P wave stands out before the QRS."""
    return Notice(
        "no-p-wave",
        "info",
        "No P wave stands out before the QRS; PR and P are not measured.",
    )


def other_identifier() -> Notice:
    """The files name two persons."""
    return Notice(
        "identifiers-differ",
        "stop",
        "The two files state different identifiers. Compare recordings of one person only; if "
        "both are of one person all the same, lift this stop.",
    )


def another_person(what: str) -> Notice:
    """The two recordings may not be of one person."""
    return Notice(
        "person-differs",
        "caution",
        f"The two files state different {what}. Make sure that both are of one person; "
        "otherwise the comparison means nothing.",
    )


def monitoring_filter(which: Sequence[str], high_pass_hz: float) -> Notice:
    """A high-pass that bends ST."""
    return Notice(
        "monitoring-filter",
        "stop",
        f"{joined(which)} recording filtered from {high_pass_hz:g} Hz up: such a filter bends ST "
        "unless it has no phase. Record again with the diagnostic filter (0.05 Hz), or lift this "
        "stop if the recorder's filter is known to keep ST.",
    )


def high_pass_differs(earlier_hz: float, later_hz: float, lead: str, shift_mv: float) -> Notice:
    """Two high-pass filters, and what the difference does to J at most."""
    return Notice(
        "high-pass-differs",
        "caution",
        f"High-pass filter {earlier_hz:g} Hz against {later_hz:g} Hz: that alone may move J by "
        f"{1000 * abs(shift_mv):.0f} µV in {lead}, where it moves most. Record both with the same "
        "filter.",
    )


def bands_differ(earlier_hz: float, later_hz: float) -> Notice:
    """Two recordings that hold different ranges of frequencies."""
    return Notice(
        "low-pass-differs",
        "caution",
        f"The earlier recording holds frequencies up to {earlier_hz:g} Hz, the later up to "
        f"{later_hz:g} Hz, by the filter stated or the sampling rate: R and S differ by up to "
        "0.2 mV for that alone, and the shift estimate with them. Record both alike.",
    )


def electrodes_elsewhere() -> Notice:
    """The files state different placements of the electrodes."""
    return Notice(
        "placement-stated-differs",
        "caution",
        "The two files state different electrode placements. Use the same placement in both.",
    )


def interchanged(electrodes: Sequence[str]) -> Notice:
    """Limb electrodes that the other recording shows to be interchanged; undone."""
    return Notice(
        "limb-electrodes-interchanged",
        "caution",
        f"{joined(electrodes)} look interchanged: undone, the limb leads agree with the other "
        "recording's. They are compared and shown as if put right. Check the cables and record "
        "again.",
    )


def chest_interchanged(electrodes: Sequence[str]) -> Notice:
    """Chest electrodes that look interchanged; which recording holds it cannot be said."""
    return Notice(
        "chest-electrodes-interchanged",
        "caution",
        f"{joined(electrodes)} look interchanged in one of the two recordings, for the leads then "
        "agree. Nothing was put right. Check the cables and record again.",
    )


def right_leg_interchanged(flat_lead: str, arm: str) -> Notice:
    """An arm cable is on the right leg."""
    return Notice(
        "right-leg-interchanged",
        "stop",
        f"Lead {flat_lead} alone is flat, as when the {arm} and RL cables are interchanged: no "
        "lead is then what it says. Check the cables and record again.",
    )


def looks_interchanged(electrodes: Sequence[str], *, of_limbs: bool) -> Notice:
    """Electrodes that look interchanged by one recording's own evidence."""
    subject = (
        f"The limb electrodes look interchanged, most likely {joined(electrodes)}"
        if of_limbs
        else f"{joined(electrodes)} look interchanged"
    )
    return Notice(
        "looks-interchanged",
        "caution",
        f"{subject}, by this recording's own leads alone; an unusual heart can look so too. "
        "Check the cables and record again.",
    )


def time_unknown() -> Notice:
    """A file does not say when it was recorded."""
    return Notice(
        "time-unknown",
        "info",
        "At least one file does not say when it was recorded; the order is the one given.",
    )


def order_reversed() -> Notice:
    """The later recording is older than the earlier."""
    return Notice(
        "order-reversed",
        "caution",
        "The recording given as later is the older one. Swap the two.",
    )


def age_against_dates(off_years: float) -> Notice:
    """The ages do not fit the time between the recordings."""
    return Notice(
        "age-against-dates",
        "caution",
        f"The ages stated and the dates of the recordings differ by {off_years:.0f} years. Make "
        "sure that both are of one person and that the recorders' clocks are right.",
    )


def paced_in_one(which: str) -> Notice:
    """Only one of the recordings is paced."""
    return Notice(
        "paced-in-one",
        "caution",
        f"Only the {which} recording holds pacing spikes: its ST and T cannot be compared with "
        "those of unpaced beats.",
    )


def block_in_one(which: str) -> Notice:
    """Only one of the recordings has a wide QRS."""
    return Notice(
        "wide-qrs-in-one",
        "caution",
        f"The QRS is wide (120 ms or more) in the {which} recording alone, as in bundle branch "
        "block: ST and T follow the conduction, and the comparison tells little of ischaemia.",
    )


def irregular(which: str) -> Notice:
    """An irregular rhythm without P waves."""
    return Notice(
        "irregular-rhythm",
        "caution",
        f"{which} recording: irregular rhythm without a P wave, as in atrial fibrillation: ST and "
        "T vary from beat to beat, and repeat noise with them.",
    )


def stop_lifted(notice: Notice) -> Notice:
    """A stop that the user has lifted."""
    return Notice(notice.code, "stop", f"{notice.text} This stop was lifted by the user.")


def not_adult() -> Notice:
    """The torso model is of adults."""
    return Notice(
        "not-adult",
        "caution",
        "The person is under 16; the torso model is of adults, so reach and shift do not hold.",
    )


def rates_differ(earlier_per_min: float, later_per_min: float) -> Notice:
    """The heart rates are far apart."""
    return Notice(
        "rate-differs",
        "caution",
        f"Heart rate {earlier_per_min:.0f} against {later_per_min:.0f} a minute: rate alone "
        "changes ST and T.",
    )


def qrs_differs(earlier_ms: float, later_ms: float) -> Notice:
    """The QRS durations are far apart."""
    return Notice(
        "qrs-duration-differs",
        "caution",
        f"QRS {earlier_ms:.0f} against {later_ms:.0f} ms: a change of conduction changes ST and "
        "T, and the shift estimate does not hold.",
    )


def limb_leads_disagree(largest_mv: float) -> Notice:
    """Limb leads that do not satisfy their algebra."""
    return Notice(
        "limb-leads-disagree",
        "caution",
        f"The limb leads contradict each other by up to {largest_mv:.2f} mV: the file was rescaled "
        "lead by lead or filtered unevenly. Export the recording again without rescaling.",
    )


def paced() -> Notice:
    """The heart was paced."""
    return Notice(
        "paced",
        "caution",
        "Pacing spikes: paced beats have their own ST and T, and a change of pacing changes them. "
        "Compare only if both recordings are paced in the same way.",
    )
