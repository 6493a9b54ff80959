"""A 1,500 deg2 region across the Galactic plane with the core-collapse model, and frames on it."""

import healpy
import numpy as np

from skytiles.ledger.ledger import Ledger
from skytiles.ledger.ledger_frame import LedgerFrame
from skytiles.ledger.undetectable import undetectable_fraction
from skytiles.region.galactic_prior import GalacticPrior
from skytiles.source.galactic_offsets import place_source
from skytiles.source.presets import PRESETS

ORDER = 8
NSIDE = 1 << ORDER
CENTRE_DEG = (285.0, 3.0)
BANDS = ("clear", "clear", "V", "R", "G", "I")


def region_pixels():
    """Pixels of a disc of 1,500 square degrees."""
    centre = healpy.ang2vec(*CENTRE_DEG, lonlat=True)
    return healpy.query_disc(NSIDE, centre, np.radians(21.95), nest=True)


def placed_core_collapse(pixels):
    ras_deg, decs_deg = healpy.pix2ang(NSIDE, pixels, nest=True, lonlat=True)
    model = PRESETS["core collapse"]()
    return place_source(
        model,
        GalacticPrior(),
        ras_deg=ras_deg,
        decs_deg=decs_deg,
        probabilities=np.ones(len(pixels)),
        spread_mag=1.2,
    )


def new_ledger(pixels, placed):
    ras_deg, decs_deg = healpy.pix2ang(NSIDE, pixels, nest=True, lonlat=True)
    return Ledger(
        np.full(len(pixels), 0.999 / len(pixels)),
        0.001,
        undetectable=undetectable_fraction(ras_deg, decs_deg),
        source_model=placed.model,
        offset_weights=placed.offset_weights,
    )


def make_frame(rng, pixels, number, *, area_deg2):
    ra_deg, dec_deg = healpy.pix2ang(NSIDE, rng.choice(pixels), nest=True, lonlat=True)
    side_deg = float(np.sqrt(area_deg2))
    centre = healpy.ang2vec(ra_deg, dec_deg, lonlat=True)
    under = healpy.query_disc(NSIDE, centre, np.radians(side_deg / np.sqrt(np.pi)), nest=True)
    indices = np.flatnonzero(np.isin(pixels, under, assume_unique=True))
    frame = LedgerFrame(
        key=number,
        t_d=float(rng.uniform(0.0, 1.0)),
        instrument=int(rng.integers(40)),
        ra_deg=float(ra_deg),
        dec_deg=float(dec_deg),
        field_deg=side_deg,
        is_examined=True,
        completeness=0.85,
        m_eff=float(rng.uniform(10.0, 18.0)),
        band=str(rng.choice(BANDS)),
    )
    return frame, indices, np.ones(len(indices))
