"""Widgets: they draw results and compute none."""
