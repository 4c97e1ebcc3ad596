"""Soundness as a theorem: honest results in many hands are never called wrong; planted errors are counted."""
