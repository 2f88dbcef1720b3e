"""Ensembles: one document tabulated for every set of parameter values of a file."""

from .run import Ensemble, tabulate_sets

__all__ = ["Ensemble", "tabulate_sets"]
