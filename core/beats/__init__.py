"""Beats: where they are, of what kind, and the one that stands for all."""
