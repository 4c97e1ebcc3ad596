"""Scales: what a manuscript says of the scores that its means sum up."""
