"""Potential documents: read, validated and understood."""

from .build import read_document, understand
from .model import ENDS, INTERPOLATIONS, SPACINGS, Document, Expectation, Grid, Interaction, Output
from .source import Source, parse_source, read_source

__all__ = [
    "ENDS",
    "INTERPOLATIONS",
    "SPACINGS",
    "Document",
    "Expectation",
    "Grid",
    "Interaction",
    "Output",
    "Source",
    "parse_source",
    "read_document",
    "read_source",
    "understand",
]
