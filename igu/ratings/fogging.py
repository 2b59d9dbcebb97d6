"""Whether a face fogs: its temperature against the dew or frost point of the air before it, at the centre of glass."""

from __future__ import annotations

from dataclasses import dataclass

from igu.laws.constants import CELSIUS
from igu.laws.humidity import fogging_humidity, fogging_temperature
from igu.model.conditions import Conditions
from igu.model.unit import Unit


@dataclass(frozen=True)
class Fog:
    """One face, counted from 1 outdoors. `limit_humidity` [-] is the relative humidity, over water, of the air at
    which the face starts to fog, None inside a gap or where no humidity reaches it; with the humidity given, `point`
    [K] is the dew or (`frost`) frost point of the air and `margin` [K] how much warmer the face is; negative: it
    fogs."""

    face: int
    where: str
    temperature: float
    limit_humidity: float | None
    humidity: float | None
    point: float | None
    frost: bool
    margin: float | None


def fogging(unit: Unit, conditions: Conditions, faces: tuple[float, ...]) -> tuple[Fog, ...]:
    """The room-side face, the outdoor face, and, where the fill's dew point is known, the coldest face of every gap.

    Parameters
    ----------
    faces : tuple of float    Face temperatures [K], outdoors first.
    """
    outdoor = _open_face(1, "outdoor face", faces[0], conditions.outdoor_air, conditions.outdoor_humidity)
    room = _open_face(len(faces), "room-side face", faces[-1], conditions.indoor_air, conditions.indoor_humidity)
    return (room, outdoor, *_gaps(unit, faces))


def _open_face(face: int, where: str, temperature: float, air: float, humidity: float | None) -> Fog:
    limit = float(fogging_humidity(temperature, air=air))
    limited = limit if limit <= 1.0 else None
    if humidity is None or humidity <= 0.0:
        return Fog(face, where, temperature, limited, humidity, None, temperature < CELSIUS, None)
    point, frost = fogging_temperature(humidity, air=air)
    return Fog(face, where, temperature, limited, humidity, float(point), bool(frost), temperature - float(point))


def _gaps(unit: Unit, faces: tuple[float, ...]) -> list[Fog]:
    point = unit.sealed.fill_dew_point
    if point is None:
        return []
    found = []
    for k, gap in enumerate(unit.gaps):
        if not gap.evacuated:
            face = 2 * k + 2 if faces[2 * k + 1] <= faces[2 * k + 2] else 2 * k + 3
            coldest = faces[face - 1]
            where = f"inside gap {k + 1}"
            found.append(Fog(face, where, coldest, None, None, point, point < CELSIUS, coldest - point))
    return found
