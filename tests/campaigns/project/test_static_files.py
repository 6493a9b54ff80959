import pytest
from django.http import HttpResponse
from django.test import RequestFactory

from campaigns.project.static_files import StaticFilesMiddleware


@pytest.fixture
def serve(settings, tmp_path):
    settings.STATIC_ROOT = tmp_path / "dist"
    settings.STATIC_ROOT.mkdir()
    (tmp_path / "secret").write_text("not for others")
    middleware = StaticFilesMiddleware(lambda request: HttpResponse("the page", status=404))

    def get(path, **headers):
        return middleware(RequestFactory().get(path, headers=headers))

    get.folder = settings.STATIC_ROOT
    return get


def test_a_file_comes_in_one_piece_with_its_type(serve):
    (serve.folder / "board.js").write_text("export const a = 1;")
    answer = serve("/static/board.js")
    assert (answer.status_code, answer.content) == (200, b"export const a = 1;")
    assert "javascript" in answer["Content-Type"]
    assert not answer.streaming


def test_the_browser_asks_again_and_hears_that_nothing_changed(serve):
    (serve.folder / "board.js").write_text("x")
    first = serve("/static/board.js")
    assert "max-age=0" in first["Cache-Control"]
    again = serve("/static/board.js", **{"If-Modified-Since": first["Last-Modified"]})
    assert (again.status_code, again.content) == (304, b"")


def test_a_bundle_that_is_built_while_the_server_runs_is_served(serve):
    assert serve("/static/late.js").status_code == 404
    (serve.folder / "late.js").write_text("x")
    assert serve("/static/late.js").status_code == 200


@pytest.mark.parametrize("path", ["/static/../secret", "/static/%2e%2e/secret", "/static//secret"])
def test_nothing_outside_the_folder_is_served(serve, path):
    assert serve(path).content == b"the page"
