"""The note as entered and as resolved: events, defaults, contradictions."""
