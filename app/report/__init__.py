"""The comparison report, a PDF."""
