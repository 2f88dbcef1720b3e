"""The floors of the package, from the ground up: a file imports only from floors below its own."""

LAYERS = (
    "problems",
    "formula",
    "units",
    "schemas",
    "forms",
    "potential",
    "document",
    "table",
    "checks",
    "predictions",
    "files",
    "reports",
    "outputs",
    "planning",
    "workflow",
    "sheets",
    "cli",
)
