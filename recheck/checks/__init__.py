"""Checks: claims become findings; the only giver of verdicts."""
