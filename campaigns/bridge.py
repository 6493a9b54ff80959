"""Rows of campaigns as values of skytiles, and back; nothing else translates between them."""

from collections.abc import Callable, Iterable, Sequence
from datetime import UTC, datetime, timedelta

import numpy as np
import numpy.typing as npt

from campaigns.models import Campaign, Claim, Constraint, Frame, RegionRevision, Tile
from campaigns.rules.examination import PROGRAM_WAYS, completeness_of
from skytiles.depth.limit_kinds import default_s_mag, effective_limit_mag, m50_mag
from skytiles.ledger.ledger import Ledger
from skytiles.ledger.ledger_frame import LedgerFrame
from skytiles.ledger.undetectable import undetectable_fraction
from skytiles.planner.observers_to_plan import HeldClaim, RecentPointing
from skytiles.planner.tiles_to_plan import PlannerTiles, make_planner_tiles
from skytiles.region.constraint_json import constraint_from_json
from skytiles.region.constraints import AnyConstraint, MapConstraint
from skytiles.region.galactic_prior import GalacticPrior
from skytiles.region.read_map import read_sky_map
from skytiles.region.region import Region
from skytiles.source.galactic_offsets import PlacedSource, place_source
from skytiles.source.galaxy import galactic_prior_of
from skytiles.source.source_json import source_from_json
from skytiles.source.source_model import SourceModel
from skytiles.sphere.healpix_door import pixel_centres
from skytiles.tiling.covered_many import covered_pixels_many
from skytiles.tiling.footprint import Footprint
from skytiles.tiling.footprint_json import footprint_from_json
from skytiles.tiling.lay_tiles import tile_footprint, tile_probabilities

_MJD_EPOCH = datetime(1858, 11, 17, tzinfo=UTC)
_DAY = timedelta(days=1)


def mjd_of(moment: datetime) -> float:
    """Modified Julian Date (UTC)."""
    return (moment - _MJD_EPOCH) / _DAY


def time_of(mjd: float) -> datetime:
    """Time of a Modified Julian Date (UTC), to the millisecond."""
    milliseconds = round(mjd * 86_400_000)
    return _MJD_EPOCH + timedelta(milliseconds=milliseconds)


# --- region ---------------------------------------------------------------------------------


def pixels_of(region: RegionRevision) -> npt.NDArray[np.int64]:
    """(p,) pixel numbers, NESTED."""
    return np.frombuffer(bytes(region.pixels), dtype="<i8")


def probabilities_of(region: RegionRevision) -> npt.NDArray[np.float64]:
    """(p,) probabilities."""
    return np.frombuffer(bytes(region.probabilities), dtype="<f8")


def region_row(
    region: Region, *, campaign: Campaign, made_at: datetime, revision: int = 1
) -> RegionRevision:
    """A revision of a campaign's region, not saved yet."""
    return RegionRevision(
        campaign=campaign,
        revision=revision,
        order=region.order,
        pixels=region.pixels.astype("<i8").tobytes(),
        probabilities=region.probabilities.astype("<f8").tobytes(),
        outside=float(region.outside),
        area_deg2={key: float(value) for key, value in region.area_deg2.items()},
        peak={"ra_deg": float(region.peak_ra_deg), "dec_deg": float(region.peak_dec_deg)},
        notes=list(region.notes),
        overlap=region.overlap,
        made_at=made_at,
    )


def region_of(row: RegionRevision) -> Region:
    """The region as skytiles knows it."""
    return Region(
        order=row.order,
        pixels=pixels_of(row),
        probabilities=probabilities_of(row),
        outside=row.outside,
        area_deg2=row.area_deg2,
        peak_ra_deg=row.peak["ra_deg"],
        peak_dec_deg=row.peak["dec_deg"],
        total_probability=1.0,
        notes=tuple(row.notes),
    )


def constraint_of(row: Constraint, *, open_upload: Callable[[str], bytes]) -> AnyConstraint:
    """A piece of direction information; `open_upload` gives the bytes of a kept file."""
    if row.kind == MapConstraint.kind:
        sky_map = read_sky_map(open_upload(row.upload_sha256))
        return MapConstraint(sky_map=sky_map, file=row.parameters.get("file", ""))
    return constraint_from_json(
        row.parameters, open_map=lambda _name: open_upload(row.upload_sha256)
    )


def tile_shares(tiles: Iterable[Tile], region: Region) -> dict[int, float]:
    """The region's probability under each tile, by number."""
    by_size: dict[tuple[float, float], list[Tile]] = {}
    for tile in tiles:
        by_size.setdefault((tile.width_deg, tile.height_deg), []).append(tile)
    shares: dict[int, float] = {}
    for (width_deg, height_deg), grid in by_size.items():
        found = tile_probabilities(
            region,
            np.array([tile.ra_deg for tile in grid]),
            np.array([tile.dec_deg for tile in grid]),
            width_deg=width_deg,
            height_deg=height_deg,
        )
        shares |= {tile.number: float(p) for tile, p in zip(grid, found, strict=True)}
    return shares


# --- ledger ---------------------------------------------------------------------------------


def source_of(campaign: Campaign) -> SourceModel:
    """The source model as the coordinator stated it, not placed yet."""
    return source_from_json(campaign.source_model)


def prior_of(campaign: Campaign) -> GalacticPrior | None:
    """The prior of the campaign's region; None: flat."""
    if campaign.source_model.get("prior") != "galactic":
        return None
    return galactic_prior_of(source_of(campaign).parameters)


def place_source_of(campaign: Campaign, region: RegionRevision) -> PlacedSource:
    """Offsets of each pixel for a source model of absolute magnitudes."""
    model = source_of(campaign)
    ras_deg, decs_deg = pixel_centres(region.order, pixels_of(region))
    return place_source(
        model,
        galactic_prior_of(model.parameters),
        ras_deg=ras_deg,
        decs_deg=decs_deg,
        probabilities=probabilities_of(region),
        spread_mag=model.parameters["spread_mag"],
    )


def empty_ledger(
    campaign: Campaign, region: RegionRevision, *, placed: PlacedSource | None
) -> Ledger:
    """The ledger before any frame; `placed` for a model that differs from pixel to pixel."""
    ras_deg, decs_deg = pixel_centres(region.order, pixels_of(region))
    return Ledger(
        probabilities_of(region),
        region.outside,
        undetectable=undetectable_fraction(ras_deg, decs_deg),
        source_model=placed.model if placed else source_of(campaign),
        offset_weights=placed.offset_weights if placed else None,
    )


def footprint_of(frame: Frame) -> Footprint:
    """The true footprint of a frame."""
    return footprint_from_json(frame.footprint)


def s_of(frame: Frame) -> float:
    """Softness of the frame's limit, magnitudes."""
    return default_s_mag(frame.limit_kind, examined_way=frame.examined_way)


def m_eff_of(frame: Frame) -> float | None:
    """Effective limit; None without a limit or as long as nobody has examined the frame."""
    if frame.limit_mag is None or not frame.is_examined:
        return None
    m50 = m50_mag(frame.limit_mag, frame.limit_kind, s=s_of(frame))
    return effective_limit_mag(m50, frame.reference_mag)


def ledger_frame_of(frame: Frame, *, event_time: datetime) -> LedgerFrame:
    """A frame as the ledger counts it."""
    return LedgerFrame(
        key=frame.number,
        t_d=(frame.mid_time - event_time) / _DAY,
        instrument=frame.instrument_id,
        ra_deg=frame.ra_deg,
        dec_deg=frame.dec_deg,
        field_deg=frame.field_deg,
        is_examined=frame.is_examined,
        completeness=completeness_of(frame.examined_way, stated=frame.completeness),
        m_eff=m_eff_of(frame),
        s=s_of(frame),
        saturation_mag=frame.saturation_mag,
        masks_saturated=frame.masks_saturated and frame.examined_way in PROGRAM_WAYS,
        band=frame.band,
    )


# --- planner --------------------------------------------------------------------------------


def planner_tiles_of(tiles: Sequence[Tile], region: RegionRevision) -> PlannerTiles:
    """Tiles with the pixels under each; the key is the tile's number."""
    footprints = [
        tile_footprint(
            tile.ra_deg, tile.dec_deg, width_deg=tile.width_deg, height_deg=tile.height_deg
        )
        for tile in tiles
    ]
    pixels = pixels_of(region)
    return make_planner_tiles(
        [tile.number for tile in tiles],
        covered_pixels_many(footprints, region.order, pixels),
        ras_deg=[tile.ra_deg for tile in tiles],
        decs_deg=[tile.dec_deg for tile in tiles],
        widths_deg=[tile.width_deg for tile in tiles],
        heights_deg=[tile.height_deg for tile in tiles],
        # What dropped out of the region is held until its lease ends, and offered to nobody.
        seats=[0 if tile.is_dropped else tile.seats for tile in tiles],
    )


def held_claim_of(claim: Claim) -> HeldClaim:
    """A claim as the planner sees it: the seat is taken until the lease ends."""
    return HeldClaim(
        observer_key=claim.instrument.site_id,
        instrument_key=claim.instrument_id,
        tile_key=claim.tile.number,
        start_mjd=mjd_of(claim.starts_at),
        end_mjd=mjd_of(claim.until),
    )


def recent_pointing_of(frame: Frame) -> RecentPointing:
    """A frame that the next one of its instrument would share a look with."""
    return RecentPointing(
        instrument_key=frame.instrument_id,
        ra_deg=frame.ra_deg,
        dec_deg=frame.dec_deg,
        mid_mjd=mjd_of(frame.mid_time),
    )
