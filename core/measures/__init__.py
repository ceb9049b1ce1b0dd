"""Measures: numbers read off the representative beat and off each beat."""
