"""What is open and selected: signals, no widgets."""
