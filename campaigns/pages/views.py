"""Pages: a frame that the browser fills. They pass who asks and which campaign, nothing else."""

from collections.abc import Callable
from functools import wraps
from typing import Any

from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.urls import reverse
from django.utils import timezone
from django.utils.http import url_has_allowed_host_and_scheme, urlencode
from django.views.decorators.csrf import ensure_csrf_cookie
from django.views.decorators.http import require_safe

from campaigns.problem_details import problem_of
from campaigns.selectors.access import (
    access_campaign,
    access_campaign_to_observe,
)
from campaigns.selectors.methods import list_methods
from observers.errors import CampaignError, NotSignedIn
from observers.selectors.access import access_account, access_coordinator
from observers.selectors.invitations import access_invitation

View = Callable[..., HttpResponse]


def page(view: View) -> View:
    """Safe methods only, the CSRF cookie set, refusals shown as a page with a way back."""

    @wraps(view)
    def guarded(request: HttpRequest, *args: Any, **kwargs: Any) -> HttpResponse:
        try:
            return view(request, *args, **kwargs)
        except NotSignedIn:
            return redirect(f"{reverse('sign-in')}?{urlencode({'next': request.path})}")
        except CampaignError as error:
            return _refusal(request, error)

    return require_safe(ensure_csrf_cookie(guarded))


@page
def home(request: HttpRequest) -> HttpResponse:
    """The campaigns that one may see."""
    return _show(request, "home")


@page
def sign_in(request: HttpRequest) -> HttpResponse:
    """Name and password; whoever is signed in goes on."""
    following = _next_page(request)
    if request.user.is_authenticated:
        return redirect(following)
    return _show(request, "sign_in", next_page=following)


@page
def join(request: HttpRequest, token: str) -> HttpResponse:
    """Where an invitation leads."""
    invitation = access_invitation(token, now=timezone.now())
    response = _show(request, "join", token=token, invitation=invitation)
    # The address is a secret: it goes nowhere as a referrer.
    response["Referrer-Policy"] = "no-referrer"
    response["Cache-Control"] = "no-store"
    return response


@page
def launch(request: HttpRequest) -> HttpResponse:
    """From an alert file to a campaign."""
    access_coordinator(request.user)
    return _show(request, "launch")


@page
def gear(request: HttpRequest) -> HttpResponse:
    """My sites, instruments and tokens."""
    access_account(request.user)
    return _show(request, "gear")


@page
def methods(request: HttpRequest) -> HttpResponse:
    """Every formula as implemented, for everybody."""
    return _show(request, "methods", chapters=list_methods())


@page
def board(request: HttpRequest, campaign_id: str) -> HttpResponse:
    """What all see."""
    return _show(request, "board", campaign=_campaign(request, campaign_id))


@page
def tonight(request: HttpRequest, campaign_id: str) -> HttpResponse:
    """What is mine."""
    campaign = access_campaign_to_observe(request.user, campaign_id)
    return _show(request, "tonight", campaign=campaign)


@page
def log(request: HttpRequest, campaign_id: str) -> HttpResponse:
    """What happened."""
    return _show(request, "log", campaign=_campaign(request, campaign_id))


def _campaign(request: HttpRequest, campaign_id: str) -> Any:
    """A campaign to watch; without an account the sign-in page comes first."""
    try:
        return access_campaign(request.user, campaign_id)
    except CampaignError:
        access_account(request.user)
        raise


def _show(request: HttpRequest, name: str, **context: Any) -> HttpResponse:
    context = {"page": name, "signed_in": request.user, "campaign": None, **context}
    return render(request, f"campaigns/{name}.html", context)


def _refusal(request: HttpRequest, error: CampaignError) -> HttpResponse:
    problem = problem_of(error)
    assert problem is not None
    return render(request, "campaigns/problem.html", problem.to_json(), status=problem.status)


def _next_page(request: HttpRequest) -> str:
    """Where to go after signing in: a path of this server, else the first page."""
    wanted = request.GET.get("next", "")
    if url_has_allowed_host_and_scheme(wanted, allowed_hosts=None):
        return wanted
    return reverse("home")
