"""Readings, roundings and slips: what would reconcile printed numbers. Gives no verdict."""
