"""An audit as text and as rows."""

from __future__ import annotations

import csv
from pathlib import Path
from typing import TYPE_CHECKING

import mixsim
from mixsim.present.columns import described

if TYPE_CHECKING:
    from mixsim.analysis import Audit, Finding

COUNTED = ("passed", "failed", "could not tell", "not applicable")


def headline(answer: Audit) -> str:
    """What was looked at, and how it stands, in a line."""
    if answer.kind == "recipe":
        return f"{answer.file}: sound, {answer.numbers} numbers, library materials included"
    held = "rows" if answer.kind == "table" else "numbers"
    return f"{answer.file}: {answer.kind}, {answer.numbers} {held}"


def findings(answer: Audit) -> list[str]:
    """A table of findings for each thing looked at, and a count."""
    if not answer.findings:
        return []
    parts = []
    for of in dict.fromkeys(finding.of for finding in answer.findings):
        here = [finding for finding in answer.findings if finding.of == of]
        rows = [(finding.verdict, f"{finding.name}: {finding.why}") for finding in here]
        parts.append(described([of, ""], rows))
    counts = {word: sum(finding.verdict == word for finding in answer.findings) for word in COUNTED}
    parts.append(", ".join(f"{count} {word}" for word, count in counts.items() if count))
    return parts


def write_csv(answer: Audit, file: Path) -> None:
    """Write one row for each fault, caution and finding."""
    with file.open("w", encoding="utf-8", newline="") as stream:
        stream.write(f"# mixsim {mixsim.__version__}, audit of {' '.join(answer.file.split())}\n")
        writer = csv.writer(stream, lineterminator="\n")
        writer.writerow(("of", "finding", "verdict", "why", "numbers (SI)"))
        writer.writerows((fault.path, "fault", "failed", str(fault), "") for fault in answer.faults)
        writer.writerows((w.path, f"caution, {w.kind}", "caution", w.message, "") for w in answer.warnings)
        for finding in answer.findings:
            writer.writerow((finding.of, finding.name, finding.verdict, finding.why, _numbers(finding)))


def _numbers(finding: Finding) -> str:
    return "; ".join(f"{name} = {value!r}" for name, value in finding.numbers.items())
