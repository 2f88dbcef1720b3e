"""Check interatomic potentials and write energy and force tables that are proved right."""

__version__ = "0.1.0"
