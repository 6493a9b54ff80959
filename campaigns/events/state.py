"""The state of a campaign that an onlooker may see: what snapshots hold and events change."""

from typing import Literal, TypedDict


class SourceShown(TypedDict):
    """Which source model the numbers rest on."""

    preset: str
    label: str
    # The earliest light under the model; null for one that always shone.
    first_light_at: str | None


class CampaignShown(TypedDict):
    """The campaign itself."""

    id: str
    title: str
    status: Literal["draft", "live", "closed"]
    is_rehearsal: bool
    is_public: bool
    kind: str
    event_time: str
    opened_at: str | None
    closed_at: str | None
    source: SourceShown


class PeakShown(TypedDict):
    """Direction of the highest probability per area."""

    ra_deg: float
    dec_deg: float


ChangeWay = Literal["added", "replaced", "switched on", "switched off", "retracted"]


class ChangeShown(TypedDict):
    """What a revision changed, as everybody is told."""

    way: ChangeWay
    said: str
    area_before_deg2: dict[str, float]
    n_tiles_new: int
    # Numbers of tiles that lost the region, and of those that got it back.
    tiles_dropped: list[int]
    tiles_back: list[int]


class RegionShown(TypedDict):
    """The region without its pixels. `overlap` says how well its constraints agree."""

    revision: int
    order: int
    n_pixels: int
    outside: float
    area_deg2: dict[str, float]
    peak: PeakShown
    notes: list[str]
    overlap: float | None
    change: ChangeShown | None


class SiteShown(TypedDict):
    """A place rounded to 0.1 degree: a site is somebody's home."""

    name: str
    latitude_deg: float
    longitude_deg: float


class InstrumentShown(TypedDict):
    """An instrument and the tile grid that it uses."""

    id: int
    name: str
    width_deg: float
    height_deg: float
    kind: str
    band: str
    tile_width_deg: float
    tile_height_deg: float


MemberStatus = Literal["silent", "in", "clouded", "out"]


class ObserverShown(TypedDict):
    """A member of the campaign."""

    name: str
    status: MemberStatus
    sites: list[SiteShown]
    instruments: list[InstrumentShown]


class TileShown(TypedDict):
    """One tile."""

    ra_deg: float
    dec_deg: float
    width_deg: float
    height_deg: float
    probability: float
    seats: int
    is_dropped: bool


class TileMoved(TypedDict):
    """What a revision of the region makes of a tile that was there before."""

    probability: float
    is_dropped: bool


class UnassignedShown(TypedDict):
    """Who got nothing, and why."""

    observer: int
    reason: str


class PlanShown(TypedDict):
    """What the newest plan promises."""

    made_at: str
    searched_expected: float
    searched_bound: float
    certificate: float
    n_observers: int
    n_assignments: int
    seconds: float
    unassigned: list[UnassignedShown]


class OfferShown(TypedDict):
    """Observer, tile and start proposed by the plan."""

    observer: int
    instrument: int
    tile: int
    starts_at: str
    ends_at: str
    gain: float


class ClaimShown(TypedDict):
    """One promise."""

    tile: int
    seat: int
    observer: int
    instrument: int
    state: Literal["held", "met", "released", "lapsed"]
    held_at: str
    starts_at: str
    until: str
    ended_at: str | None


class PolygonShown(TypedDict):
    """A footprint with corners."""

    shape: Literal["polygon"]
    corners_deg: list[list[float]]


class CircleShown(TypedDict):
    """A round footprint."""

    shape: Literal["circle"]
    ra_deg: float
    dec_deg: float
    diameter_deg: float


class MosaicShown(TypedDict):
    """A footprint of several pictures that were exposed together."""

    shape: Literal["mosaic"]
    ra_deg: float
    dec_deg: float
    parts: list[PolygonShown | CircleShown]


class FrameShown(TypedDict):
    """One frame. `m_eff` is empty when it has no limit or nobody has examined it."""

    observer: int
    instrument: int
    tile: int | None
    state: Literal["counted", "withdrawn"]
    footprint: PolygonShown | CircleShown | MosaicShown
    mid_time: str
    duration_s: float
    band: str
    limit_mag: float | None
    limit_kind: str
    m_eff: float | None
    is_examined: bool
    examined_way: str
    reported_at: str


class Recent(TypedDict):
    """One line of what just happened."""

    seq: int
    at: str
    said: str


class State(TypedDict):
    """Everything that an onlooker sees, at one sequence number."""

    campaign: CampaignShown
    region: RegionShown | None
    observers: dict[str, ObserverShown]
    tiles: dict[str, TileShown]
    plan: PlanShown | None
    offers: list[OfferShown]
    claims: dict[str, ClaimShown]
    frames: dict[str, FrameShown]
    recent: list[Recent]


N_RECENT = 40
