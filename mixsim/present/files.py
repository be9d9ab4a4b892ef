"""Answers as files, by suffix: written whole or not at all."""

from __future__ import annotations

from pathlib import Path

from mixsim.analysis import Audit, Fitted, Inversion, Judgement, Lot, Prediction, Weighed
from mixsim.errors import Refusal
from mixsim.present.atomic import check_place, refuse, write_whole
from mixsim.present.json_text import json_text

PLOTS = (".png", ".svg", ".pdf")
SUFFIXES = (".csv", ".json", ".npz", *PLOTS)


def check(file: str | Path) -> None:
    """Refuse a file that could not be written, before anything is computed.

    Raises
    ------
    BadInput
        Where its suffix is unknown, or its folder is missing or not writable.
    """
    check_place(Path(file), SUFFIXES)


def write(
    answer: Prediction | Inversion | Fitted | Judgement | Lot | Audit | Weighed, file: str | Path
) -> None:
    """Write an answer to a file in the format that its suffix says.

    Parameters
    ----------
    answer
        A prediction, a sweep, an inversion, a fit, verdicts or an audit.
    file
        .csv .json .npz for numbers; .png .svg .pdf for the plot. An existing file is replaced whole.

    Raises
    ------
    BadInput
        Where the file cannot be written, or the answer has no such picture.
    """
    place = Path(file)
    check(place)
    try:
        write_whole(place, lambda beside: _write(answer, beside))
    except Refusal as refusal:
        raise refuse(place, refusal.found, refusal.allowed) from None


def _write(answer: Prediction | Inversion | Fitted | Judgement | Lot | Audit | Weighed, file: Path) -> None:
    suffix = file.suffix.lower()
    if isinstance(answer, Weighed) and suffix not in (".csv", ".json"):
        raise Refusal(f"a weigh sheet in {suffix}", "one of .csv .json")
    if isinstance(answer, Audit) and suffix in (".csv", ".npz"):
        if suffix == ".npz":
            raise Refusal("an audit in .npz", f"one of .csv .json {' '.join(PLOTS)}")
        from mixsim.present.audits import write_csv as write_findings

        write_findings(answer, file)
    elif suffix == ".json":
        file.write_text(json_text(answer), encoding="utf-8")
    elif suffix == ".csv":
        assert not isinstance(answer, Audit)
        from mixsim.present.comma_separated import write_csv

        write_csv(answer, file)
    elif suffix == ".npz":
        assert not isinstance(answer, Audit | Weighed)
        from mixsim.present.archive import write_npz

        write_npz(answer, file)
    else:
        assert not isinstance(answer, Weighed)
        _plot(answer, file, suffix)


def _plot(answer: Prediction | Inversion | Fitted | Judgement | Lot | Audit, file: Path, suffix: str) -> None:
    from mixsim.present.plots import figure
    from mixsim.present.plots.style import RESOLUTION, settings

    # no dates: the same answer gives the same file
    metadata = {".png": {"Software": "mixsim"}, ".svg": {"Creator": "mixsim", "Date": None}}.get(
        suffix, {"Creator": "mixsim", "Producer": "mixsim", "CreationDate": None}
    )
    drawn = figure(answer)
    with settings():
        drawn.savefig(file, format=suffix[1:], dpi=RESOLUTION, metadata=metadata)
