"""Records with further leads, from the file to the lead in depth."""

from __future__ import annotations

from PySide6.QtCore import Qt

from app.state.bench_state import Phase
from core import read_recording
from core.recordings.wfdb_writer import write_wfdb
from tests.app.drawing.readback import drawn_on, words
from tests.helpers.further import with_further
from tests.journeys.stories import pair


def test_a_record_with_posterior_leads_shows_them(bench, until, qtbot, tmp_path):
    earlier, later = (read_recording(path) for path in pair("steady"))
    written = [
        write_wfdb(with_further(recording, *leads), tmp_path / name)[0]
        for recording, leads, name in ((earlier, ["V7"], "day-1"), (later, ["V7", "V8"], "day-2"))
    ]
    bench.open_pair(*written)
    until(Phase.JUDGED)
    for lead, told in (("V7", "Earlier ST"), ("V8", "Only the later recording holds this lead")):
        at = bench.wall.cell_of(lead).center().toPoint()
        qtbot.mouseClick(bench.wall, Qt.MouseButton.LeftButton, pos=at)
        said = words(drawn_on(bench.lead_depth))
        assert said.startswith(f"{lead} in depth not judged")
        assert told in said
