"""Names of the twelve leads and the algebra that ties the limb leads together.

Ten electrodes give twelve leads of which eight are independent: I and II fix the
other four limb leads at every instant (III = II - I, aVR = -(I + II)/2,
aVL = I - II/2, aVF = II - I/2).
"""

from __future__ import annotations

import re
from collections.abc import Collection, Mapping

import numpy as np
from numpy.typing import NDArray

LIMB_LEADS = ("I", "II", "III", "aVR", "aVL", "aVF")
CHEST_LEADS = ("V1", "V2", "V3", "V4", "V5", "V6")
TWELVE_LEADS = LIMB_LEADS + CHEST_LEADS
INDEPENDENT_LEADS = ("I", "II", *CHEST_LEADS)
# Right and posterior chest leads and the Frank leads: kept and measured, not judged.
FURTHER_LEADS = ("V3R", "V4R", "V5R", "V6R", "V7", "V8", "V9", "X", "Y", "Z")

# Rows follow LIMB_LEADS, columns are I and II.
LIMB_FROM_I_AND_II: NDArray[np.float64] = np.array(
    [[1.0, 0.0], [0.0, 1.0], [-1.0, 1.0], [-0.5, -0.5], [1.0, -0.5], [-0.5, 1.0]]
)

_BY_LOWER_NAME = {lead.lower(): lead for lead in (*TWELVE_LEADS, *FURTHER_LEADS)} | {
    f"v{axis.lower()}": axis for axis in "XYZ"
}
# Words that stand before a lead's name in headers: "Lead I", "ECG V1", "MLII" (a limb lead
# recorded from electrodes on the torso, as WFDB records name it).
_BEFORE_NAME = re.compile(r"^(?:ecg|lead|ekg)[\s_:.-]*|^ml(?=i)", re.IGNORECASE)


def lead_of_label(label: str) -> tuple[str, float] | None:
    """The lead that a channel label means, and the sign to bring it to that lead.

    Parameters
    ----------
    label : str
        For example ``"avr"``, ``"Lead II"``, ``"MLIII"`` or ``"-aVR"``.

    Returns
    -------
    tuple of (lead, sign), or None
        None where the label is neither one of the twelve nor one of `FURTHER_LEADS`.
    """
    text = label.strip()
    sign = 1.0
    if text.startswith(("-", "\N{MINUS SIGN}")):
        sign, text = -1.0, text[1:].strip()
    for _ in range(2):
        text = _BEFORE_NAME.sub("", text)
    lead = _BY_LOWER_NAME.get(text.lower())
    return None if lead is None else (lead, sign)


def lead_in_sentence(text: str) -> tuple[str, float] | None:
    """The first lead named inside a longer text, such as ``"Lead I (Einthoven)"``.

    Returns what `lead_of_label` returns for that word.
    """
    for word in re.findall(r"-?[A-Za-z]+[0-9]*", text):
        found = lead_of_label(word)
        if found is not None:
            return found
    return None


def can_derive_limb_leads(present: Collection[str]) -> bool:
    """Whether the limb leads among *present* fix all six: any two of them do."""
    return sum(lead in present for lead in LIMB_LEADS) >= 2


def complete_limb_leads(
    channels_mv: Mapping[str, NDArray[np.float64]],
) -> dict[str, NDArray[np.float64]]:
    """All six limb leads, those not given derived from two that are.

    Parameters
    ----------
    channels_mv : mapping of lead to ndarray, shape (n_samples,)
        At least two limb leads, in mV. Other leads are ignored.

    Returns
    -------
    dict of lead to ndarray, shape (n_samples,)
        Given leads are returned as they are.

    Raises
    ------
    ValueError
        If fewer than two limb leads are given.
    """
    given = [lead for lead in LIMB_LEADS if lead in channels_mv]
    if len(given) < 2:
        raise ValueError(f"two limb leads are needed to derive the others, got {given}")
    if "I" in channels_mv and "II" in channels_mv:
        given = ["I", "II"]
    rows = [LIMB_LEADS.index(lead) for lead in given[:2]]
    to_i_and_ii = np.linalg.inv(LIMB_FROM_I_AND_II[rows])
    pair_mv = np.stack([channels_mv[lead] for lead in given[:2]])
    i_and_ii_mv = pair_mv if given[:2] == ["I", "II"] else to_i_and_ii @ pair_mv
    lead_i, lead_ii = i_and_ii_mv
    derived = {
        "I": lead_i,
        "II": lead_ii,
        "III": lead_ii - lead_i,
        "aVR": -(lead_i + lead_ii) / 2,
        "aVL": lead_i - lead_ii / 2,
        "aVF": lead_ii - lead_i / 2,
    }
    return {lead: channels_mv.get(lead, derived[lead]) for lead in LIMB_LEADS}


def twelve_from_independent(independent: NDArray[np.float64]) -> NDArray[np.float64]:
    """The twelve leads of the eight independent ones, limb algebra exact.

    Parameters
    ----------
    independent : ndarray, shape (..., 8, n)
        Leads I, II, V1 to V6.

    Returns
    -------
    ndarray, shape (..., 12, n)
        Leads in the order of `TWELVE_LEADS`.
    """
    lead_i, lead_ii = independent[..., 0, :], independent[..., 1, :]
    limb = np.stack(
        [
            lead_i,
            lead_ii,
            lead_ii - lead_i,
            -(lead_i + lead_ii) / 2,
            lead_i - lead_ii / 2,
            lead_ii - lead_i / 2,
        ],
        axis=-2,
    )
    return np.concatenate([limb, independent[..., 2:, :]], axis=-2)


def independent_from_twelve(twelve: NDArray[np.float64]) -> NDArray[np.float64]:
    """Leads I, II, V1 to V6 of an array whose last axis but one is the twelve leads."""
    rows = [TWELVE_LEADS.index(lead) for lead in INDEPENDENT_LEADS]
    return twelve[..., rows, :]
