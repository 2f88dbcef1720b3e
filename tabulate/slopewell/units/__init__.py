"""Units and physical constants."""

from .system import (
    Dimension,
    Quantity,
    Unit,
    UnitError,
    UnitSystem,
    convert_text,
    dimension,
    quantity,
    ratio,
    temperature,
    unit,
    unit_system,
)

__all__ = [
    "Dimension",
    "Quantity",
    "Unit",
    "UnitError",
    "UnitSystem",
    "convert_text",
    "dimension",
    "quantity",
    "ratio",
    "temperature",
    "unit",
    "unit_system",
]
