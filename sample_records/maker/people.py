"""Three invented people: their hearts' conduction and repolarisation, and how they lie.

The numbers were found by a random search for tracings that a reader would call normal.
"""

from __future__ import annotations

from dataclasses import dataclass

from sample_records.maker.heart import Conduction, Repolarisation
from sample_records.maker.person import Anatomy


@dataclass(frozen=True, slots=True)
class Person:
    """One invented person."""

    anatomy: Anatomy
    conduction: Conduction
    repolarisation: Repolarisation
    right_share: float
    gain: float


ASH = Person(
    Anatomy((0.0287, -0.0459, -0.0153), 34.5, 13.2, 26.2),
    Conduction(
        (
            (19.1, 0.5, 6.8),
            (8.2, 16.9, 0.3),
            (10.6, -29.4, 0.8),
            (-9.3, -2.6, 7.0),
            (-5.5, 12.4, 2.1),
            (49.7, -2.3, -1.5),
        ),
        (0.0, 4.7, 0.6, 5.6, 31.3, 8.1),
        wall_m_per_s=0.282,
        endocardium_m_per_s=1.32,
    ),
    Repolarisation(epicardium_ms=-29.4, apex_ms=-19.8, right_ms=14.2, later_ms=-0.448),
    right_share=0.42,
    gain=1.15,
)
BIRCH = Person(
    Anatomy((0.0202, -0.0374, -0.0097), 25.6, 6.6, 49.0),
    Conduction(
        (
            (31.3, -2.6, 2.6),
            (1.8, 19.7, -12.1),
            (11.5, -15.8, 1.8),
            (-9.5, 4.0, 2.7),
            (-7.5, 8.4, 21.8),
            (63.9, 4.7, -11.0),
        ),
        (1.1, 8.0, 0.0, 4.8, 12.6, 9.7),
        wall_m_per_s=0.411,
        endocardium_m_per_s=1.07,
    ),
    Repolarisation(epicardium_ms=-46.2, apex_ms=-18.4, right_ms=2.0, later_ms=-0.269),
    right_share=0.18,
    gain=1.12,
)
CEDAR = Person(
    Anatomy((0.0366, -0.0391, 0.0032), 27.1, 11.4, 40.3),
    Conduction(
        (
            (23.3, -8.7, 3.3),
            (17.8, 9.6, -0.9),
            (5.7, -14.6, -0.4),
            (-20.8, -1.2, 11.1),
            (-7.1, 13.2, 26.2),
            (51.1, 4.4, 0.7),
        ),
        (0.0, 6.9, 0.8, 8.0, 19.3, 7.3),
        wall_m_per_s=0.380,
        endocardium_m_per_s=0.894,
    ),
    Repolarisation(epicardium_ms=-50.4, apex_ms=-3.5, right_ms=-1.0, later_ms=-0.833),
    right_share=0.15,
    gain=0.97,
)
