"""Claims that are held: they keep their tile and time, and count with their chance to be met."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
import numpy.typing as npt

from skytiles.planner.forecast_options import expected_detection
from skytiles.planner.observer_options import Outlook
from skytiles.planner.observers_to_plan import HeldClaim, PlannerInstrument, PlannerObserver
from skytiles.planner.plan_problem import Commitment, SeatTaken
from skytiles.planner.start_slots import slot_minutes
from skytiles.planner.tiles_to_plan import PlannerTiles
from skytiles.sphere.angles import unit_vectors

Floats = npt.NDArray[np.float64]


def after_claims(
    remaining: Floats,
    claims: Sequence[HeldClaim],
    observers: Mapping[int, PlannerObserver],
    outlook: Outlook,
) -> Floats:
    """What remains to be found once the claims in hand have had their chance.

    Parameters
    ----------
    remaining : (p, n) float       after the ledger's frames
    claims : sequence of HeldClaim
    observers : mapping            by key; a claim of somebody unknown only keeps its seat
    outlook : Outlook

    Returns
    -------
    (p, n) float    a new array
    """
    result = remaining.copy()
    for claim in claims:
        observer = observers.get(claim.observer_key)
        instrument = instrument_of(observer, claim.instrument_key)
        tile = position_of(outlook.tiles, claim.tile_key)
        if observer is None or instrument is None or tile is None:
            continue
        found = observer.chance * _detection(claim, observer, instrument, tile, outlook)
        pixels, shares = outlook.tiles.pixels_of(tile), outlook.tiles.fractions_of(tile)
        result[pixels] *= 1.0 - shares[:, None] * found[None, :]
    return result


def seats_of(claims: Sequence[HeldClaim], tiles: PlannerTiles) -> tuple[SeatTaken, ...]:
    """Seats that the claims hold until they end.

    Parameters
    ----------
    claims : sequence of HeldClaim
    tiles : PlannerTiles

    Returns
    -------
    tuple of SeatTaken    from the beginning of time: a claim holds its seat already now
    """
    places = [(position_of(tiles, claim.tile_key), claim.end_mjd) for claim in claims]
    return tuple(SeatTaken(tile, -np.inf, end) for tile, end in places if tile is not None)


def busy_times(observer: PlannerObserver, claims: Sequence[HeldClaim]) -> list[tuple[float, float]]:
    """When one observer is at work on what it has promised.

    Parameters
    ----------
    observer : PlannerObserver
    claims : sequence of HeldClaim    of everybody

    Returns
    -------
    list of (start, end)    MJD: one slot each, not the whole lease
    """
    own = [claim for claim in claims if claim.observer_key == observer.key]
    slot_d = slot_minutes(observer, 0.0) / 1440.0
    return [(one.start_mjd, min(one.end_mjd, one.start_mjd + slot_d)) for one in own]


def fixed_pointings(
    observer: PlannerObserver, claims: Sequence[HeldClaim], tiles: PlannerTiles
) -> tuple[Commitment, ...]:
    """Where one observer points now and for its claims.

    Parameters
    ----------
    observer : PlannerObserver
    claims : sequence of HeldClaim    of everybody
    tiles : PlannerTiles

    Returns
    -------
    tuple of Commitment
    """
    own = [claim for claim in claims if claim.observer_key == observer.key]
    pointings = []
    for claim, (start_mjd, end_mjd) in zip(own, busy_times(observer, own), strict=True):
        tile = position_of(tiles, claim.tile_key)
        if tile is not None:
            vector = unit_vectors(tiles.ras_deg[tile], tiles.decs_deg[tile])
            pointings.append(Commitment(start_mjd, end_mjd, vector))
    if observer.last_ra_deg is not None and observer.last_dec_deg is not None:
        vector = unit_vectors(observer.last_ra_deg, observer.last_dec_deg)
        pointings.append(Commitment(observer.free_from_mjd, observer.free_from_mjd, vector))
    return tuple(pointings)


def instrument_of(
    observer: PlannerObserver | None, instrument_key: int
) -> PlannerInstrument | None:
    """An observer's instrument by its key.

    Parameters
    ----------
    observer : PlannerObserver or None
    instrument_key : int

    Returns
    -------
    PlannerInstrument or None    None when there is none
    """
    instruments = observer.instruments if observer is not None else ()
    return next((one for one in instruments if one.key == instrument_key), None)


def position_of(tiles: PlannerTiles, tile_key: int) -> int | None:
    """Position of a tile by its key.

    Parameters
    ----------
    tiles : PlannerTiles
    tile_key : int

    Returns
    -------
    int or None    None when there is no such tile
    """
    places = np.flatnonzero(tiles.keys == tile_key)
    return int(places[0]) if len(places) else None


def _detection(
    claim: HeldClaim,
    observer: PlannerObserver,
    instrument: PlannerInstrument,
    tile: int,
    outlook: Outlook,
) -> Floats:
    """(n,) chance that the claim's frame finds the source, were it taken."""
    series_d = instrument.series_s / 86400.0
    mid_mjd = min(claim.start_mjd + series_d / 2.0, claim.end_mjd)
    places, mids_mjd = np.array([tile]), np.array([mid_mjd])
    altitudes = outlook.altitudes_deg(observer, places, mids_mjd)
    limits_mag = outlook.limits_mag(observer, instrument, places, mids_mjd, altitudes)
    if not np.isfinite(limits_mag[0, 0]):
        return np.zeros(outlook.scenarios.n_scenarios)
    magnitudes = outlook.scenarios.magnitudes(mids_mjd - outlook.event_mjd, instrument.band)
    return expected_detection(instrument, magnitudes, limits_mag)[0]
