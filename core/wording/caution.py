"""The placement caveat and the cautions, the same words everywhere a result is shown."""

from __future__ import annotations

PLACEMENT_CAVEAT = (
    "Placement caveat: chest electrodes are often a centimetre or two off their sites, and such "
    "shifts alone change ST and T. The placement reach states how far they can change them in "
    "this person; the estimated shift is inferred from the QRS, not measured on the chest. A "
    "change inside the reach may still come from the heart."
)

CAUTIONS = (
    "Decision support for trained readers; not a diagnosis and not a medical device.",
    "A change inside the placement reach is not thereby harmless and must never delay care.",
    "Clinical judgement, local protocols and licensed practice decide.",
    "When in doubt, check the electrode sites and record again.",
)

CAUTION = " ".join(CAUTIONS)

# What the torso model does not hold, said wherever there is room for it.
KNOWN_LIMITS = (
    "The torso model is of adults. Conduction change, pacing, ectopy, rate and posture change "
    "ST and T too. A 12-lead ECG cannot see everything."
)
