"""Comparison: two recordings of one person, judged lead by lead."""
