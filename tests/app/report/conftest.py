from __future__ import annotations

import pytest

from app.report.report import write_report
from core import Comparison


@pytest.fixture(scope="session")
def raised_pdf(qapp, raised: Comparison) -> bytes:
    return write_report(raised)
