"""What a [pane.NAME] or [sheet.NAME] says of itself in the sun: band values, or a file of spectra."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from igu.errors import ModelError
from igu.model.casefile.faults import Faults, listed, shown
from igu.model.casefile.files import read_text
from igu.model.casefile.section import Section
from igu.model.optics import BroadbandOptics, PaneDescription, SpectralOptics, solar_range

HEADS = ("wavelength_nm", "transmittance", "reflectance_coated_side", "reflectance_glass_side")
"""Column heads of a file of spectra, in any order."""

_BANDS = ("solar", "light")
_VALUES = ("transmittance", "reflectance_coated_side", "reflectance_glass_side")

WEIGHTS = 0.02
"""How far a solar value may leave the range of its light value [-]: measured values are rounded and weighted by other
tables than ours; common practice, no source."""

Columns = dict[str, tuple[float, ...]]


def measured_optics(section: Section) -> tuple[PaneDescription | None, bool]:
    """Optics of a measured pane with its coated side turned indoors, None where nothing is given or a fault was found;
    and whether its two sides are alike."""
    keys = [f"{band}_{value}" for band in _BANDS for value in _VALUES]
    section.exclusive("spectrum", tuple(keys))
    if "spectrum" in section:
        return _spectral(section)
    solar, light = ([section.number(f"{band}_{value}") for value in _VALUES] for band in _BANDS)
    _whole_band(section, "solar", _VALUES)
    _whole_band(section, "light", _VALUES)
    if any(f"light_{value}" in section for value in _VALUES) and "solar_transmittance" not in section:
        section.missing("solar_transmittance", "the solar values beside those of the light")
    return _bands(section, solar, light, _VALUES)


def sheet_optics(section: Section) -> PaneDescription | None:
    """Optics of an infrared-transparent sheet, alike on both sides; None where nothing is given or a fault was
    found."""
    values = ("transmittance", "reflectance")
    solar, light = ([section.number(f"{band}_{value}") for value in values] for band in _BANDS)
    for band in _BANDS:
        _whole_band(section, band, values)
    return _bands(section, [*solar, solar[-1]], [*light, light[-1]], values)[0]


def _whole_band(section: Section, band: str, values: Sequence[str]) -> None:
    """Refuse a band of which only a part is given."""
    keys = [f"{band}_{value}" for value in values]
    if any(key in section for key in keys):
        for key in keys:
            if key not in section:
                section.missing(key, f"all of {listed(keys)}, or none")


def _bands(
    section: Section, solar: Sequence[float | None], light: Sequence[float | None], values: Sequence[str]
) -> tuple[PaneDescription | None, bool]:
    if solar[0] is None or solar[1] is None or solar[2] is None:
        return None, True
    through, coated, glass = solar[0], solar[1], solar[2]
    try:
        optics = BroadbandOptics(through, glass, coated, light[0], light[2], light[1])
    except ModelError as error:
        section.fault("solar_transmittance", given=shown(through), allowed=f"values that go together: {error}")
        return None, True
    _doubt(section, solar, light, values)
    return optics, coated == glass and light[1] == light[2]


def _doubt(
    section: Section, solar: Sequence[float | None], light: Sequence[float | None], values: Sequence[str]
) -> None:
    """Warn of a solar value that no spectrum has beside its light value."""
    for name, whole, seen in zip(values, solar, light, strict=False):
        if whole is None or seen is None:
            continue
        low, high = solar_range(seen)
        if not low - WEIGHTS <= whole <= high + WEIGHTS:
            possible = f"only {low:.2f} to {high:.2f} is possible (weights of this package)"
            section.warn(f"solar_{name}", f"{whole:g} contradicts light_{name} {seen:g}, beside which {possible}")


def _spectral(section: Section) -> tuple[PaneDescription | None, bool]:
    name = section.text("spectrum")
    if name is None:
        return None, True
    path = Path(section.file).parent / name
    text = read_text(path, section.faults, wanted=f"a file of spectra with the columns {listed(HEADS)}")
    columns = None if text is None else _columns(text, str(path), section.faults)
    if columns is None:
        return None, True
    through, coated, glass = (columns[head] for head in HEADS[1:])
    try:
        optics = SpectralOptics(tuple(x * 1e-9 for x in columns[HEADS[0]]), through, glass, coated)
    except ModelError as error:
        section.faults.add(str(path), "", given="spectra that cannot be", allowed=str(error))
        return None, True
    return optics, coated == glass


def _columns(text: str, file: str, faults: Faults) -> Columns | None:
    """The four columns of a file of spectra; None, and a fault for every bad line, where they do not read."""
    lines = [(k, line) for k, line in enumerate(text.splitlines(), 1) if line.strip() and not line.startswith("#")]
    heads = [head.strip() for head in lines[0][1].split(",")] if lines else []
    if sorted(heads) != sorted(HEADS):
        place = f"line {lines[0][0]}" if lines else ""
        faults.add(file, place, given=f"the columns {listed(heads)}", allowed=f"the columns {listed(HEADS)}")
        return None
    rows = [_row(number, line, file, faults) for number, line in lines[1:]]
    good = [row for row in rows if row is not None]
    if len(good) < len(rows) or not good:
        if not good:
            faults.add(file, "", given="no line of values", allowed="one line for each wavelength")
        return None
    return {head: tuple(row[k] for row in good) for k, head in enumerate(heads)}


def _row(number: int, line: str, file: str, faults: Faults) -> tuple[float, ...] | None:
    cells = line.split(",")
    try:
        values = tuple(float(cell) for cell in cells)
    except ValueError:
        values = ()
    if len(values) != len(HEADS) or not all(abs(v) < 1e9 for v in values):
        faults.add(file, f"line {number}", given=shown(line.strip()), allowed=f"{len(HEADS)} numbers")
        return None
    return values
