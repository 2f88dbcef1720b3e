"""Potentials: energy curves with their cutoff treatment and landmarks."""

from .curve import Curve
from .cutoff import TREATMENTS, Cutoff, treat
from .landmarks import Extremum, Landmarks, find_landmarks
from .potential import Potential

__all__ = ["TREATMENTS", "Curve", "Cutoff", "Extremum", "Landmarks", "Potential", "find_landmarks", "treat"]
