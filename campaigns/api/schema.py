"""What /api/schema/ says beyond the views: typed answers, and the problem that any may be."""

from typing import Any

from django.conf import settings
from drf_spectacular.extensions import OpenApiAuthenticationExtension
from drf_spectacular.plumbing import resolve_type_hint

PROBLEM_SCHEMA: dict[str, Any] = {
    "type": "object",
    "description": "RFC 9457 problem details; `code` is stable, `advice` says what to do.",
    "required": ["type", "title", "status", "detail", "code", "advice"],
    "properties": {
        "type": {"type": "string"},
        "title": {"type": "string"},
        "status": {"type": "integer"},
        "detail": {"type": "string"},
        "code": {"type": "string"},
        "advice": {"type": "string"},
        "errors": {
            "type": "array",
            "items": {
                "type": "object",
                "required": ["field", "detail"],
                "properties": {"field": {"type": "string"}, "detail": {"type": "string"}},
            },
        },
        "alternative": {
            "type": ["object", "null"],
            "description": "With code tile-taken: the best tile now, or null.",
        },
    },
}
_PROBLEM_ANSWER: dict[str, Any] = {
    "description": "A problem: what happened and what to do.",
    "content": {"application/problem+json": {"schema": {"$ref": "#/components/schemas/Problem"}}},
}
IDEMPOTENCY_KEY: dict[str, Any] = {
    "in": "header",
    "name": "Idempotency-Key",
    "required": False,
    "description": "A UUID made by the client: the same key gives the same answer for 30 days; "
    "with another body it is refused (422).",
    "schema": {"type": "string", "format": "uuid"},
}
# Views whose creating POST keeps its answer.
KEYED = frozenset(
    {
        "campaigns_create",
        "campaigns_claims_create",
        "campaigns_frames_create",
        "sites_create",
        "instruments_create",
    }
)


_SHAPES: dict[str, Any] = {}


def answer_schema(shape: Any) -> dict[str, Any]:
    """A reference to the JSON schema of a TypedDict, which finish_schema writes once."""
    _SHAPES[shape.__name__] = shape
    return {"$ref": f"#/components/schemas/{shape.__name__}"}


def finish_schema(result: dict[str, Any], **_: Any) -> dict[str, Any]:
    """Add answers, the problem answer to every operation, and the key to those that keep one."""
    schemas = result.setdefault("components", {}).setdefault("schemas", {})
    schemas["Problem"] = PROBLEM_SCHEMA
    for name, shape in sorted(_SHAPES.items()):
        schemas[name] = _in_words_of_3_1(resolve_type_hint(shape))
    for operations in result.get("paths", {}).values():
        for operation in operations.values():
            operation["responses"].setdefault("default", _PROBLEM_ANSWER)
            if operation.get("operationId") in KEYED:
                operation.setdefault("parameters", []).append(IDEMPOTENCY_KEY)
    return result


def _in_words_of_3_1(schema: Any) -> Any:
    """The plumbing speaks OpenAPI 3.0: there `nullable`, here a null among the types."""
    if isinstance(schema, list):
        return [_in_words_of_3_1(item) for item in schema]
    if not isinstance(schema, dict):
        return schema
    plain = {key: _in_words_of_3_1(item) for key, item in schema.items() if key != "nullable"}
    if not schema.get("nullable"):
        return plain
    return {"anyOf": [plain, {"type": "null"}]}


class BearerScheme(OpenApiAuthenticationExtension):
    """Programs: Authorization: Bearer."""

    target_class = "campaigns.api.authentication.BearerAuthentication"
    name = "bearer"

    def get_security_definition(self, auto_schema: Any) -> dict[str, Any]:
        """How programs sign in."""
        return {"type": "http", "scheme": "bearer"}


class SessionScheme(OpenApiAuthenticationExtension):
    """Browsers: the session cookie, and X-CSRFToken on everything that writes."""

    target_class = "campaigns.api.authentication.SessionAuthentication"
    name = "session"

    def get_security_definition(self, auto_schema: Any) -> dict[str, Any]:
        """How browsers sign in."""
        return {"type": "apiKey", "in": "cookie", "name": settings.SESSION_COOKIE_NAME}
