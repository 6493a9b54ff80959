"""FITS files written by astropy (the oracle), and the invented map of fixtures/."""

import importlib.util
import io
from pathlib import Path

import numpy as np
import pytest
from astropy.io import fits

FIXTURES = Path(__file__).resolve().parents[3] / "fixtures"


@pytest.fixture(scope="session")
def example_map():
    """The module that makes an invented multi-order map."""
    spec = importlib.util.spec_from_file_location(
        "make_example_map", FIXTURES / "make_example_map.py"
    )
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return module


@pytest.fixture(scope="session")
def example_bytes(example_map):
    """The invented map as a file."""
    return example_map.map_bytes(7, "2027-03-14T05:06:07")


@pytest.fixture(scope="session")
def alerts_folder():
    """Where the example alerts are."""
    return FIXTURES / "alerts"


@pytest.fixture(scope="session")
def table_bytes():
    """A function that writes columns and keywords as a FITS table, by astropy."""

    def write(columns, **keywords):
        table = fits.BinTableHDU.from_columns([fits.Column(**column) for column in columns])
        for name, value in keywords.items():
            table.header[name.replace("_", "-")] = value
        file = io.BytesIO()
        fits.HDUList([fits.PrimaryHDU(), table]).writeto(file)
        return file.getvalue()

    return write


@pytest.fixture(scope="session")
def multi_order_bytes(table_bytes):
    """A function that writes a multi-order map from UNIQ and densities."""

    def write(uniq, densities, *, form="K", **keywords):
        keywords = {"ORDERING": "NUNIQ", "DATE_OBS": "2027-03-14T05:06:07"} | keywords
        columns = [
            {"name": "UNIQ", "format": form, "array": np.asarray(uniq)},
            {"name": "PROBDENSITY", "format": "D", "array": np.asarray(densities, dtype=float)},
        ]
        return table_bytes(columns, **keywords)

    return write


@pytest.fixture(scope="session")
def flat_bytes(table_bytes):
    """A function that writes a single-resolution map, a row for each so many pixels."""

    def write(probabilities, *, ordering, per_row=1, **keywords):
        values = np.asarray(probabilities, dtype=float).reshape(-1, per_row)
        column = {"name": "PROB", "format": f"{per_row}D", "array": values}
        nside = round((values.size / 12) ** 0.5)
        keywords = {"ORDERING": ordering, "NSIDE": nside, "INDXSCHM": "IMPLICIT"} | keywords
        return table_bytes([column], **keywords)

    return write
