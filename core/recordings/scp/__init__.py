"""SCP-ECG records (EN 1064, ISO 11073-91064), protocol versions 1 to 3."""
