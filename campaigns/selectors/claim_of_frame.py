"""For which claim was a frame taken?"""

from campaigns.models import Campaign, Claim
from observers.models import Instrument
from skytiles.sphere.angles import separations_deg
from skytiles.tiling.footprint import Footprint


def find_claim(campaign: Campaign, instrument: Instrument, *, footprint: Footprint) -> Claim | None:
    """The held claim of the instrument whose tile's centre lies nearest, well inside the frame."""
    held = Claim.objects.filter(
        campaign=campaign, instrument=instrument, state=Claim.State.HELD
    ).select_related("tile")
    near = [(_distance_deg(claim, footprint), claim.pk, claim) for claim in held]
    reach_deg = footprint.smallest_side_deg / 2.0
    return min(near)[2] if near and min(near)[0] <= reach_deg else None


def _distance_deg(claim: Claim, footprint: Footprint) -> float:
    return float(
        separations_deg(
            claim.tile.ra_deg,
            claim.tile.dec_deg,
            footprint.centre_ra_deg,
            footprint.centre_dec_deg,
        )
    )
