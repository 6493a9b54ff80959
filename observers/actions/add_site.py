"""Somebody tells where they observe from."""

from collections.abc import Mapping
from datetime import datetime
from typing import Any

from observers.actions.write_transaction import write_transaction
from observers.errors import refuse_problems
from observers.models import Person, Site
from observers.rules.problem import Problem
from observers.rules.site import site_problems

ADVICE = "Correct the named fields."


def add_site(actor: Person, values: Mapping[str, Any], *, now: datetime) -> Site:
    """Add a site of the person who acts."""
    site = Site(owner=actor, created_at=now, **values)
    refuse_problems(site_problems(site), advice=ADVICE)
    with write_transaction():
        refuse_problems(same_name_problems(site), advice=ADVICE)
        site.save(force_insert=True)
    return site


def same_name_problems(site: Site) -> list[Problem]:
    """The name is unique among the sites of one owner; the database guarantees it."""
    others = Site.objects.filter(owner_id=site.owner_id, name=site.name).exclude(pk=site.pk)
    if others.exists():
        return [Problem("name", f"You have a site named {site.name!r} already.")]
    return []
