"""Units of voltage as files write them, in any case."""

from __future__ import annotations

MILLIVOLTS_PER_UNIT = {"mv": 1.0, "uv": 1e-3, "µv": 1e-3, "μv": 1e-3, "v": 1e3, "nv": 1e-6}
