"""The selection report: a finished assessment laid out as PDF."""
