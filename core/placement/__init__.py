"""Placement: what electrodes elsewhere would have recorded, and where they were."""
