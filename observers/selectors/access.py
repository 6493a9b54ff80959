"""Gatekeepers: edges fetch guarded objects only through these."""

from observers.errors import NotAllowed, NotFound, NotSignedIn
from observers.models import Instrument, Person, Role, Site

_SIGN_IN = "Sign in, or ask a coordinator for an invitation."


def access_account(actor: Person | None) -> Person:
    """The person who acts; NotSignedIn when there is none."""
    if actor is None or not actor.is_authenticated or not actor.is_active:
        raise NotSignedIn("This needs an account.", advice=_SIGN_IN)
    return actor


def access_coordinator(actor: Person | None) -> Person:
    """The person who acts, who must be a coordinator."""
    person = access_account(actor)
    if person.role != Role.COORDINATOR:
        raise NotAllowed("Only a coordinator may do this.", advice="Ask a coordinator.")
    return person


def access_site(actor: Person | None, site_id: int) -> Site:
    """A site with its exact place: only for its owner and for coordinators."""
    person = access_account(actor)
    site = Site.objects.select_related("owner").filter(pk=site_id).first()
    if site is None or not may_see_exact_place(person, site):
        raise NotFound(
            f"There is no site {site_id} of yours.", advice="See your sites under My gear."
        )
    return site


def access_instrument(actor: Person | None, instrument_id: int) -> Instrument:
    """An instrument of the person who acts, or any for a coordinator."""
    person = access_account(actor)
    rows = Instrument.objects.select_related("owner", "site")
    instrument = rows.filter(pk=instrument_id).first()
    if instrument is None or not _is_theirs_or_coordinated(person, instrument.owner_id):
        raise NotFound(
            f"There is no instrument {instrument_id} of yours.",
            advice="See your instruments under My gear.",
        )
    return instrument


def access_own_instrument(actor: Person | None, instrument_id: int) -> Instrument:
    """An instrument that the person who acts observes with."""
    instrument = access_instrument(actor, instrument_id)
    if actor is None or instrument.owner_id != actor.pk:
        raise NotAllowed(
            f"Instrument {instrument_id} belongs to somebody else.",
            advice="Name an instrument of your own.",
        )
    return instrument


def may_see_exact_place(person: Person, site: Site) -> bool:
    """A site is somebody's home: exact values go to its owner and to coordinators."""
    return _is_theirs_or_coordinated(person, site.owner_id)


def _is_theirs_or_coordinated(person: Person, owner_id: int) -> bool:
    return owner_id == person.pk or person.role == Role.COORDINATOR
