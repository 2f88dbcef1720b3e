"""The catalogue of published forms."""

from .catalogue import Form, Parameter, catalogue, form, paste_block

__all__ = ["Form", "Parameter", "catalogue", "form", "paste_block"]
