"""Every error of the API in one shape: RFC 9457 problem details."""

from collections.abc import Iterator, Mapping
from typing import Any

from django.core.exceptions import PermissionDenied
from django.http import Http404, HttpRequest, JsonResponse
from rest_framework import exceptions, status
from rest_framework.response import Response
from rest_framework.views import set_rollback

from campaigns.problem_details import ADVICE, CONTENT_TYPE, Problem, problem_for_status, problem_of
from observers.errors import NotSignedIn


def handle_exception(error: Exception, context: Mapping[str, Any]) -> Response | None:
    """Answer for REST framework; None (an unknown error) becomes a logged 500."""
    problem = problem_of(error) or _framework_problem(error)
    if problem is None:
        return None
    set_rollback()
    return Response(
        problem.to_json(),
        status=problem.status,
        headers=_headers(error),
        content_type=CONTENT_TYPE,
    )


def problem_response(problem: Problem) -> JsonResponse:
    """The same shape where no REST framework view is in play."""
    return JsonResponse(problem.to_json(), status=problem.status, content_type=CONTENT_TYPE)


def no_such_endpoint(request: HttpRequest, rest: str = "") -> JsonResponse:
    """Catch-all below /api/v1/."""
    detail = f"There is nothing at {request.path}."
    return problem_response(problem_for_status(404, code="not-found", detail=detail))


def _framework_problem(error: Exception) -> Problem | None:
    if isinstance(error, Http404):
        detail = str(error) if error.args else "There is no such thing, or it is not for you."
        return problem_for_status(404, code="not-found", detail=detail)
    if isinstance(error, PermissionDenied):
        return problem_for_status(403, code="not-allowed", detail=str(error))
    if isinstance(error, exceptions.NotAuthenticated):
        return problem_of(NotSignedIn("This needs an account.", ADVICE[401]))
    if isinstance(error, exceptions.ValidationError):
        return _validation_problem(error)
    if isinstance(error, exceptions.APIException):
        return _api_exception_problem(error)
    return None


def _validation_problem(error: exceptions.ValidationError) -> Problem:
    errors = list(_flat_errors(error.detail))
    return Problem(
        code="invalid",
        status=status.HTTP_400_BAD_REQUEST,
        title="Some fields cannot be used",
        detail=" ".join(_sentence(one) for one in errors) or "The body cannot be used.",
        advice="Correct the fields named under errors and send it again.",
        errors=errors,
    )


def _api_exception_problem(error: exceptions.APIException) -> Problem:
    code = "csrf" if str(error.detail).startswith("CSRF") else _code(error)
    problem = problem_for_status(
        error.status_code, code=code.replace("_", "-"), detail=str(error.detail)
    )
    if code != "csrf":
        return problem
    advice = "Load the page again and repeat; programs send X-CSRFToken or use a bearer token."
    return Problem(code, problem.status, problem.title, problem.detail, advice)


def _code(error: exceptions.APIException) -> str:
    return str(getattr(error.detail, "code", error.default_code))


def _flat_errors(detail: Any, field: str = "") -> Iterator[dict[str, str]]:
    """Nested serializer errors as one list of {"field", "detail"}."""
    if isinstance(detail, Mapping):
        for name, inner in detail.items():
            own = "" if name == "non_field_errors" else str(name)
            yield from _flat_errors(inner, ".".join(part for part in (field, own) if part))
    elif isinstance(detail, list | tuple):
        for inner in detail:
            yield from _flat_errors(inner, field)
    else:
        yield {"field": field, "detail": str(detail)}


def _sentence(error: Mapping[str, str]) -> str:
    return f"{error['field']}: {error['detail']}" if error["field"] else error["detail"]


def _headers(error: Exception) -> dict[str, str]:
    headers = {}
    if auth_header := getattr(error, "auth_header", None):
        headers["WWW-Authenticate"] = auth_header
    if wait_s := getattr(error, "wait", None):
        headers["Retry-After"] = str(int(wait_s) + 1)
    return headers
