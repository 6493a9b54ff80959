"""The description of the API is complete enough to be read by programs."""


def test_the_schema_is_openapi_3_1_and_names_the_endpoints(client, db):
    schema = client.get("/api/schema/").json()
    assert schema["openapi"].startswith("3.1")
    for path in ("session", "invitations", "invitations/accept", "tokens"):
        assert f"/api/v1/{path}" in schema["paths"]


def test_every_operation_says_what_it_does(client, db):
    schema = client.get("/api/schema/").json()
    for path, operations in schema["paths"].items():
        for method, operation in operations.items():
            assert operation.get("summary"), f"{method} {path}"
