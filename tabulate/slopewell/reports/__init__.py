"""Reports: for people in the terminal, for machines as JSON."""

from .report import Report, Subject, certificate_record, landmark_record, potential_landmarks, unusable

__all__ = ["Report", "Subject", "certificate_record", "landmark_record", "potential_landmarks", "unusable"]
