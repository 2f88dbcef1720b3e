"""JSON tables: their faults, each with its place."""

from __future__ import annotations

import json
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from slopewell.files import jsonfile
from slopewell.problems import UnusableInput
from tables import small_table


def refused(folder: Path, change: Any) -> str:
    path = folder / "pair.json"
    jsonfile.write(small_table(), path)
    data = json.loads(path.read_text(encoding="utf-8"))
    change(data)
    path.write_text(json.dumps(data))
    with pytest.raises(UnusableInput) as caught:
        jsonfile.read(path)
    return str(caught.value)


def test_a_missing_key_is_said(tmp_path: Path) -> None:
    assert "'units' is a required property" in refused(tmp_path, lambda data: data.pop("units"))


def test_columns_of_different_length_are_said(tmp_path: Path) -> None:
    said = refused(tmp_path, lambda data: data["interactions"]["A-B"]["energy"].pop())
    assert said == "interactions.A-B: The columns differ in length."


def test_a_word_among_the_numbers_is_said(tmp_path: Path) -> None:
    said = refused(tmp_path, lambda data: data["interactions"]["A-B"]["energy"].__setitem__(2, "x"))
    assert said == "interactions.A-B: A column holds something that is no number."


def test_columns_in_columns_are_refused(tmp_path: Path) -> None:
    def nest(data: Any) -> None:
        record = data["interactions"]["A-B"]
        record |= {name: [record[name]] for name in ("separation", "energy", "force")}

    assert "interactions.A-B" in refused(tmp_path, nest)


def test_another_schema_is_said(tmp_path: Path) -> None:
    assert refused(tmp_path, lambda data: data.update(schema="slopewell/table/9")).startswith("schema: ")


def test_a_number_that_is_not_finite_is_refused(tmp_path: Path) -> None:
    table = small_table()
    rows = table.interactions[0]
    assert rows.energy is not None
    wild = replace(table, interactions=(replace(rows, energy=np.full(rows.energy.size, np.nan)),))
    with pytest.raises(UnusableInput, match="not finite"):
        jsonfile.write(wild, tmp_path / "pair.json")
