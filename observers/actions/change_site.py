"""The owner sets a site right."""

from collections.abc import Mapping
from typing import Any

from observers.actions.add_site import ADVICE, same_name_problems
from observers.actions.write_transaction import write_transaction
from observers.errors import refuse_problems
from observers.models import Site
from observers.rules.site import site_problems


def change_site(site: Site, values: Mapping[str, Any]) -> Site:
    """Change the given fields of a site fetched by access_site."""
    for field, value in values.items():
        setattr(site, field, value)
    refuse_problems(site_problems(site), advice=ADVICE)
    with write_transaction():
        refuse_problems(same_name_problems(site), advice=ADVICE)
        site.save(update_fields=list(values))
    return site
