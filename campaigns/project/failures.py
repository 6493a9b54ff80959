"""What people and programs see when a request fails outside a view: one shape, or one page."""

from typing import Any

from django.http import HttpRequest, HttpResponse, JsonResponse
from django.shortcuts import render

from campaigns.problem_details import CONTENT_TYPE, Problem, problem_for_status


def failure_response(request: HttpRequest, problem: Problem) -> HttpResponse:
    """A problem object for programs, a page with a way back for people."""
    if request.path.startswith("/api/"):
        return JsonResponse(problem.to_json(), status=problem.status, content_type=CONTENT_TYPE)
    return render(request, "campaigns/problem.html", problem.to_json(), status=problem.status)


def bad_request(request: HttpRequest, exception: Any = None) -> HttpResponse:
    """Django's handler400."""
    return _plain(request, problem_for_status(400, detail="The request cannot be read."))


def not_allowed(request: HttpRequest, exception: Any = None) -> HttpResponse:
    """Django's handler403."""
    return failure_response(request, problem_for_status(403, code="not-allowed"))


def not_found(request: HttpRequest, exception: Any = None) -> HttpResponse:
    """Django's handler404."""
    detail = f"There is nothing at {request.path}."
    return failure_response(request, problem_for_status(404, code="not-found", detail=detail))


def server_error(request: HttpRequest) -> HttpResponse:
    """Django's handler500: the cause is in the log, never in the answer."""
    detail = "Something went wrong on the server; it was written down."
    return _plain(request, problem_for_status(500, code="server-error", detail=detail))


def csrf_failure(request: HttpRequest, reason: str = "") -> HttpResponse:
    """A form without its token."""
    problem = problem_for_status(403, code="csrf", detail="The CSRF token is missing or wrong.")
    return failure_response(request, problem)


def _plain(request: HttpRequest, problem: Problem) -> HttpResponse:
    """Without a template that might touch what just failed (the session, the host)."""
    if request.path.startswith("/api/"):
        return JsonResponse(problem.to_json(), status=problem.status, content_type=CONTENT_TYPE)
    words = f"{problem.title}\n\n{problem.detail}\n{problem.advice}\n"
    return HttpResponse(words, status=problem.status, content_type="text/plain; charset=utf-8")
