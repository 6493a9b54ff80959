"""Who can be planned for, with what, and what they have already promised."""

from __future__ import annotations

from dataclasses import dataclass

from skytiles.depth.gear import Gear
from skytiles.night.mount_limits import NO_LIMITS, MountLimits
from skytiles.night.place import Place
from skytiles.night.sun_rule import SolarRating


@dataclass(frozen=True)
class PlannerInstrument:
    """One instrument: its depth, its solar rating, its mount, its series and its tile grid.

    `completeness` and `s_mag` are what is expected of its examination (ledger: c and s);
    `reference_mag` is the depth of what its frames are compared with, None if deep enough.
    """

    key: int
    gear: Gear
    rating: SolarRating
    overhead_s: float
    slew_deg_per_s: float
    tile_width_deg: float
    tile_height_deg: float
    n_tiles_left: int
    completeness: float = 0.85
    s_mag: float = 0.2
    reference_mag: float | None = None
    mount: MountLimits = NO_LIMITS

    @property
    def band(self) -> str:
        """Band of its frames."""
        return self.gear.band

    @property
    def series_s(self) -> float:
        """Seconds that one tile takes once the instrument points at it."""
        return self.gear.exposure_s * self.gear.n_exposures + self.overhead_s


@dataclass(frozen=True)
class RecentPointing:
    """A tile-sized look that an instrument has just taken or has promised to take."""

    instrument_key: int
    ra_deg: float
    dec_deg: float
    mid_mjd: float


@dataclass(frozen=True)
class PlannerObserver:
    """One person or robot at one place.

    Times are MJD (UTC). `met_chance` is the chance that an accepted tile is shot, `clear_chance`
    the chance of a clear sky there. `sky_brightness_mag` is the dark zenith sky, V mag/arcsec^2.
    """

    key: int
    place: Place
    instruments: tuple[PlannerInstrument, ...]
    free_from_mjd: float
    free_until_mjd: float
    met_chance: float = 0.8
    clear_chance: float = 0.6
    sky_brightness_mag: float = 20.5
    seeing_arcsec: float = 3.0
    last_ra_deg: float | None = None
    last_dec_deg: float | None = None
    recent: tuple[RecentPointing, ...] = ()

    @property
    def chance(self) -> float:
        """Chance that a tile given to this observer becomes a frame."""
        return self.met_chance * self.clear_chance


@dataclass(frozen=True)
class HeldClaim:
    """A tile that somebody has promised to shoot; it stays theirs in every new plan."""

    observer_key: int
    instrument_key: int
    tile_key: int
    start_mjd: float
    end_mjd: float
