"""HL7 annotated ECGs (ANSI/HL7 V3 aECG R1, 2004)."""
