import pytest

from tests.skytiles.tiling import real_frames


@pytest.fixture(scope="session")
def real_frame():
    """A function that reads a file of astropy's test data by name."""
    return real_frames.real_frame
