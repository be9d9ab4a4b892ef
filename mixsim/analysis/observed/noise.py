"""How unsure readings are where they do not say it themselves."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.observed.observation import OF_PIECE, Observation
from mixsim.errors import Refusal

Floats = NDArray[np.float64]

_PARTNER = {
    "permittivity_real": "permittivity_imag",
    "permittivity_imag": "permittivity_real",
    "permeability_real": "permeability_imag",
    "permeability_imag": "permeability_real",
    "index": "extinction",
    "extinction": "index",
}


def modulus(quantity: str, columns: Mapping[str, Floats]) -> Floats:
    """What a relative noise is a share of, for one column of a spectrum.

    The modulus of the complex number that was read. A loss tangent is ε″ over ε′, each with that noise: √(1 +
    tan²δ).
    """
    values = columns[quantity]
    if quantity.endswith("loss_tangent"):
        return np.asarray(np.hypot(1.0, values))
    partner = columns.get(_PARTNER.get(quantity, ""))
    return np.abs(values) if partner is None else np.asarray(np.hypot(values, partner))


def weighed(observations: Sequence[Observation]) -> tuple[Floats, bool]:
    """Standard uncertainty of every reading in one row, and whether it is but a ratio.

    Where no reading states one, real and imaginary parts weigh the same all over a spectrum, and the size of
    their noise is left to the residuals.

    Raises
    ------
    Refusal
        Where some state one and others do not, or one that always must does not.
    """
    stated = np.concatenate([one.std for one in observations])
    lacking = [one for one in observations if np.isnan(one.std).any()]
    if not lacking:
        return stated, False
    piece = next((one for one in lacking if one.quantity in OF_PIECE), None)
    if piece is not None or np.isfinite(stated).any():
        which = (piece or lacking[0]).label
        found = f"{which} ({(piece or lacking[0]).source}) states no ±, and other readings do"
        raise Refusal(
            found if piece is None else f"{which} states no ±", "give each its ±, or noise to a spectrum"
        )
    return np.concatenate([_ratio(one, observations) for one in observations]), True


def _ratio(one: Observation, observations: Sequence[Observation]) -> Floats:
    """Uncertainty of a column that states none, against that of a permittivity."""
    if one.quantity.endswith("loss_tangent"):
        whole = one.quantity.replace("magnetic_loss_tangent", "permeability_real")
        whole = whole.replace("loss_tangent", "permittivity_real")
        beside = [o for o in observations if o.quantity == whole and o.source == one.source]
        if beside:
            return np.full(len(one.values), 1.0 / float(np.sqrt(np.mean(beside[0].values ** 2))))
    if one.quantity in ("conductivity", "absorption_coefficient"):
        return np.full(len(one.values), float(np.sqrt(np.mean(one.values**2))) or 1.0)
    return np.ones(len(one.values))
