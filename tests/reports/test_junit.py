from __future__ import annotations

import xml.etree.ElementTree as ET

import pytest
from slopewell.checks import Finding
from slopewell.problems import Problem
from slopewell.reports import Report, Subject
from slopewell.reports.junit import junit_text

FOUND = Subject(
    file="beads.toml",
    findings=(
        Finding("error", "It jumps.", "Switch it.", check="cutoff-steps", interaction="A-B"),
        Finding("warning", "Two wells.", "Look.", check="single-well", interaction="A-B"),
    ),
    landmarks=({"interaction": "A-A"}, {"interaction": "A-B"}),
    checked=("cutoff-steps", "single-well"),
)
LOST = Subject(file="none.toml", problems=(Problem("units", "Not \x00 there.", "Add it."),))
EXPECTED = """\
<?xml version="1.0" encoding="UTF-8"?>
<testsuites name="slopewell" tests="5" failures="1" errors="1">
  <testsuite name="beads.toml" tests="4" failures="1" errors="0">
    <testcase classname="beads.toml.A-A" name="cutoff-steps" />
    <testcase classname="beads.toml.A-A" name="single-well" />
    <testcase classname="beads.toml.A-B" name="cutoff-steps">
      <failure type="cutoff-steps" message="It jumps.">error: It jumps. Try: Switch it.</failure>
    </testcase>
    <testcase classname="beads.toml.A-B" name="single-well">
      <system-out>warning: Two wells. Try: Look.</system-out>
    </testcase>
  </testsuite>
  <testsuite name="none.toml" tests="1" failures="0" errors="1">
    <testcase classname="none.toml" name="can be used">
      <error message="units: Not � there.">Try: Add it.</error>
    </testcase>
  </testsuite>
</testsuites>
"""


def test_a_report_as_tests() -> None:
    assert junit_text(Report((FOUND, LOST))) == EXPECTED


def test_strictly_a_warning_is_a_failure() -> None:
    root = ET.fromstring(junit_text(Report((FOUND,)), strict=True).encode())
    assert root.get("failures") == "2"


@pytest.mark.parametrize("text", ["]]>", "<a & b>", "\ud800", '"'])
def test_any_text_makes_well_formed_xml(text: str) -> None:
    subject = Subject(file="x.toml", problems=(Problem("", text, text),))
    (error,) = ET.fromstring(junit_text(Report((subject,))).encode()).iter("error")
    assert error.get("message") == text.replace("\ud800", "�")
