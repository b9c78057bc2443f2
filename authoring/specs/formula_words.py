"""Stage 1, read: the words that a formula in item text may use, and what they stand for."""

from __future__ import annotations

from authoring.working.nodes import Relation

_GREEK_NAMES = (
    *("alpha", "beta", "gamma", "delta", "epsilon", "zeta", "eta", "theta", "kappa", "lambda", "mu", "nu"),
    *("pi", "rho", "sigma", "tau", "phi", "chi", "psi", "omega", "Delta", "Sigma", "Omega"),
)
GREEK: dict[str, str] = dict(zip(_GREEK_NAMES, "αβγδεζηθκλμνπρστφχψωΔΣΩ", strict=True))

RELATIONS: dict[str, Relation] = {
    "=": "=",
    "≈": "≈",
    "\\approx": "≈",
    "<": "<",
    "\\lt": "<",
    ">": ">",
    "\\gt": ">",
    "→": "→",
    "->": "→",
    "\\to": "→",
    "\\rightarrow": "→",
}
MINUS = ("-", "−", "–")
TIMES = ("×", "·", "⋅", "\\times", "\\cdot")
SPACES = ("\\,", "\\;", "\\:", "\\!", "\\ ", "~", "\\quad")

# Units of this subject, as they are written, and as they print.
_PLAIN_UNITS = (
    *("eV", "keV", "meV", "kJ", "J", "aJ", "nm", "pm", "mm", "cm", "Å", "mol", "Hz", "THz", "kg", "g", "K", "V", "s"),
    *("kJ/mol", "J/mol"),
)
UNITS: dict[str, str] = {
    **{unit: unit for unit in _PLAIN_UNITS},
    "cm^{-1}": "cm⁻¹",
    "cm^-1": "cm⁻¹",
    "kJ mol^{-1}": "kJ mol⁻¹",
    "kJ mol^-1": "kJ mol⁻¹",
}
COMMANDS = (
    *("\\frac", "\\sqrt", "\\mathrm", "\\text", "\\left", "\\right", "\\infty", "\\prime", "\\ast"),
    *(f"\\{name}" for name in GREEK),
    *(name for name in (*RELATIONS, *TIMES) if name.startswith("\\")),
)
