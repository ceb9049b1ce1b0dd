from __future__ import annotations

from datetime import datetime

import numpy as np
import pytest

from core import RecordingError, read_recording
from core.recordings.leads import TWELVE_LEADS
from sample_records.maker.dicom_file import coded, waveform_group
from tests.helpers.dicom_files import write_object

LEADS = list(TWELVE_LEADS)


@pytest.fixture
def counts() -> np.ndarray:
    return np.random.default_rng(3).integers(-900, 900, (2000, 12)).astype(np.int16)


def test_samples_subject_and_time_are_read(tmp_path, counts):
    group = waveform_group(counts, LEADS, 500, step_uv=2.5)
    recording = read_recording(write_object(tmp_path / "a.dcm", group))
    np.testing.assert_allclose(recording.signal_mv, counts * 0.0025, rtol=1e-12)
    assert recording.subject.id == "P-7"
    assert recording.subject.name == "Tester Tess"
    assert (recording.subject.sex, recording.subject.age_years) == ("female", 42.0)
    assert recording.recorded_at == datetime(2030, 5, 6, 7, 8, 9)


def test_the_format_is_recognised_by_content(tmp_path, counts):
    path = write_object(tmp_path / "no-ending", waveform_group(counts, LEADS, 500, step_uv=1))
    assert read_recording(path).source.format == "DICOM"


def test_sensitivity_correction_baseline_and_unit_are_honoured(tmp_path, counts):
    group = waveform_group(counts, LEADS, 500, step_uv=1)
    channel = group.ChannelDefinitionSequence[6]
    channel.ChannelSensitivity = "0.004"
    channel.ChannelSensitivityCorrectionFactor = "1.25"
    channel.ChannelBaseline = "0.3"
    channel.ChannelSensitivityUnitsSequence = coded("mV", "UCUM", "millivolt")
    recording = read_recording(write_object(tmp_path / "b.dcm", group))
    np.testing.assert_allclose(recording.signal_mv[:, 6], counts[:, 6] * 0.005 + 0.3, rtol=1e-12)
    np.testing.assert_allclose(recording.signal_mv[:, 7], counts[:, 7] / 1000, rtol=1e-12)


@pytest.mark.parametrize("bits", [12, 13, 15, 16])
def test_samples_of_12_to_16_bits_keep_their_sign(tmp_path, counts, bits):
    # A writer may leave the bits above the stored ones empty.
    empty_above = (counts.astype(np.int32) & ((1 << bits) - 1)).astype(np.uint16)
    group = waveform_group(empty_above.view(np.int16), LEADS, 500, step_uv=1)
    for channel in group.ChannelDefinitionSequence:
        channel.WaveformBitsStored = bits
    recording = read_recording(write_object(tmp_path / "c.dcm", group))
    np.testing.assert_allclose(recording.signal_mv, counts / 1000, rtol=1e-12)


def test_a_lead_named_only_by_its_meaning_is_found(tmp_path, counts):
    group = waveform_group(counts, LEADS, 500, step_uv=1)
    for lead, channel in zip(LEADS, group.ChannelDefinitionSequence, strict=True):
        channel.ChannelSourceSequence = coded("X-1", "99LOCAL", f"Lead {lead} (surface)")
    assert read_recording(write_object(tmp_path / "d.dcm", group)).leads_present == TWELVE_LEADS


@pytest.mark.parametrize(("style", "shift"), [("5.6.3-9-{}", 0), ("2:{}", 131072), ("2:{}", 0)])
def test_lead_codes_of_both_schemes(tmp_path, counts, style, shift):
    # CID 3001: SCP-ECG numbers 1, 2, 61 to 64, 3 to 8; MDC codes are 131072 more.
    numbers = [1, 2, 61, 62, 63, 64, 3, 4, 5, 6, 7, 8]
    group = waveform_group(counts, LEADS, 500, step_uv=1)
    for number, channel in zip(numbers, group.ChannelDefinitionSequence, strict=True):
        channel.ChannelSourceSequence = coded(style.format(number + shift), "MDC", "unnamed")
    recording = read_recording(write_object(tmp_path / "e.dcm", group))
    np.testing.assert_allclose(recording.signal_mv, counts / 1000, rtol=1e-12)


def test_the_rhythm_is_taken_and_never_a_derived_beat(tmp_path, counts):
    beat = waveform_group(counts[:600], LEADS, 500, step_uv=1)
    beat.WaveformOriginality = "DERIVED"
    rhythm = waveform_group(counts, LEADS, 500, step_uv=1)
    recording = read_recording(write_object(tmp_path / "f.dcm", beat, rhythm))
    assert recording.n_samples == 2000
    with pytest.raises(RecordingError, match="only a derived beat"):
        read_recording(write_object(tmp_path / "g.dcm", beat))


def test_leads_spread_over_simultaneous_groups_are_joined(tmp_path, counts):
    limb = waveform_group(counts[:, :6], LEADS[:6], 500, step_uv=1)
    chest = waveform_group(counts[:, 6:], LEADS[6:], 500, step_uv=1)
    recording = read_recording(write_object(tmp_path / "h.dcm", limb, chest))
    np.testing.assert_allclose(recording.signal_mv, counts / 1000, rtol=1e-12)
    chest.MultiplexGroupTimeOffset = "2500"
    with pytest.raises(RecordingError, match="recorded together"):
        read_recording(write_object(tmp_path / "i.dcm", limb, chest))


def test_padding_becomes_a_gap(tmp_path, counts):
    counts[50:60, 2] = -32768
    group = waveform_group(counts, LEADS, 500, step_uv=1)
    group.add_new(0x5400100A, "SS", -32768)
    recording = read_recording(write_object(tmp_path / "j.dcm", group))
    assert np.isnan(recording.signal_mv[50:60, 2]).all()
    assert np.isnan(recording.signal_mv).sum() == 10


def test_what_is_no_ecg_waveform_is_refused(tmp_path, counts):
    with pytest.raises(RecordingError, match="holds no waveform"):
        read_recording(write_object(tmp_path / "k.dcm"))
    group = waveform_group(counts, LEADS, 500, step_uv=1)
    channel = group.ChannelDefinitionSequence[0]
    channel.ChannelSensitivityUnitsSequence = coded("mm[Hg]", "UCUM", "pressure")
    with pytest.raises(RecordingError, match="no voltage"):
        read_recording(write_object(tmp_path / "l.dcm", group))
    del channel.ChannelSensitivityUnitsSequence
    with pytest.raises(RecordingError, match="without a unit"):
        read_recording(write_object(tmp_path / "m.dcm", group))


def test_a_truncated_file_is_refused(tmp_path, counts):
    path = write_object(tmp_path / "n.dcm", waveform_group(counts, LEADS, 500, step_uv=1))
    path.write_bytes(path.read_bytes()[:9000])
    with pytest.raises(RecordingError, match="Export it again"):
        read_recording(path)
