"""Predictions: what handbooks list, and a trial run, from any energy curve on a range."""
