"""The plot of an audit: what is beside what, and nothing that looks like a residual where there is none."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

import mixsim
from mixsim.errors import Refusal
from mixsim.present.plots import figure


def test_a_material_beside_its_reconstruction() -> None:
    drawn = figure(mixsim.audit("nickel-zinc-ferrite"))
    assert len(drawn.axes) == 6  # ε and μ, three panels each
    real, rebuilt = drawn.axes[1].lines
    assert (real.get_label(), rebuilt.get_label()) == ("model", "Kramers–Kronig of the loss")
    np.testing.assert_allclose(real.get_ydata(), rebuilt.get_ydata(), atol=0.2)
    low, high = drawn.axes[0].get_ylim()
    assert high - low > 0.1  # a level is drawn as one, not as its rounding
    assert "nothing failed" in drawn.get_suptitle()


def test_what_failed_stands_in_the_title(tmp_path: Path) -> None:
    frequency = np.geomspace(1.0, 100.0, 80)
    value = (4.0 + 10.0 / (1.0 - 1j * frequency / 20.0)).conj()
    rows = [f"{f!r},{e.real!r},{e.imag!r}" for f, e in zip(frequency.tolist(), value.tolist(), strict=True)]
    head = "# convention: exp(-iwt)\nfrequency [GHz], permittivity_real, permittivity_imag\n"
    file = tmp_path / "wrong.csv"
    file.write_text(head + "\n".join(rows), encoding="utf-8")
    drawn = figure(mixsim.audit(file))
    assert "failed: passivity, Kramers–Kronig" in drawn.get_suptitle()
    assert drawn.axes[0].lines[0].get_label() == "measured"
    assert np.abs(drawn.axes[2].lines[0].get_ydata()).max() > 10.0


def test_without_a_spectrum_there_is_no_plot(tmp_path: Path) -> None:
    file = tmp_path / "r.toml"
    file.write_text('host.material = "m"\nmaterials.m.permittivity.infinity = 2.0\n', encoding="utf-8")
    with pytest.raises(Refusal, match="no spectrum to draw"):
        figure(mixsim.audit(file))
