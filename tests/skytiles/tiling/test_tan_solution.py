import warnings
from pathlib import Path

import numpy as np
import pytest
from astropy import units
from astropy.coordinates import FK5, SkyCoord
from astropy.io import fits
from astropy.wcs import WCS

from skytiles.sphere.angles import separations_deg
from skytiles.tiling.frame_header import wcs_footprint
from skytiles.tiling.tan_solution import read_tan_solution

SOLVED = {
    "NAXIS1": 1024,
    "NAXIS2": 768,
    "CTYPE1": "RA---TAN",
    "CTYPE2": "DEC--TAN",
    "CRPIX1": 512.5,
    "CRPIX2": 384.5,
    "CRVAL1": 10.0,
    "CRVAL2": 41.0,
    "CDELT1": -5e-4,
    "CDELT2": 5e-4,
    "CROTA2": 30.0,
}


def corners_px(width, height):
    return np.array([0.5, width + 0.5, width + 0.5, 0.5]), np.array(
        [0.5, 0.5, height + 0.5, height + 0.5]
    )


def without(fields, *names):
    return {key: value for key, value in fields.items() if key not in names}


# Published examples.


def test_the_worked_example_of_calabretta_and_greisen(authority):
    # Calabretta & Greisen 2002, A&A 395, 1077, example 1; published (section from memory).
    row = authority["wcs_cg1"]
    xs, ys = np.transpose(row["inputs"]["pixels"])
    found = np.transpose(read_tan_solution(row["inputs"]["header"]).ras_decs_deg(xs, ys))
    assert found == pytest.approx(np.array(row["expected"]), abs=row["tolerance"])


@pytest.mark.parametrize("form", ["crota", "cd"])
def test_crota_and_cd_agree(authority, form):
    # Greisen & Calabretta 2002, A&A 395, 1061; recomputed.
    row = authority["wcs_crota"]
    header = row["inputs"]["crota"]
    if form == "cd":
        header = without(header, "CDELT1", "CDELT2", "CROTA2") | row["inputs"]["cd"]
    xs, ys = np.transpose(row["inputs"]["pixels"])
    found = np.transpose(read_tan_solution(header).ras_decs_deg(xs, ys))
    assert found == pytest.approx(np.array(row["expected"]), abs=row["tolerance"])


def test_a_footprint_over_ra_0(authority):
    # fixtures/authority, wcs_wrap; recomputed. As the worked example: 512 x 512 of 0.003 deg,
    # turned by nothing; the corners are the middles of the corner pixels of a 333 px field.
    row = authority["wcs_wrap"]
    header = row["inputs"]["header"] | {"CRPIX1": 0.0, "CRPIX2": 0.0, "CDELT1": -1.0, "CDELT2": 1.0}
    solution = read_tan_solution(header)
    # Turned back onto the plane by hand: x = tan(d_ra), y = tan(dec) / cos(d_ra).
    d_ras = np.radians(np.array(row["expected"])[:, 0] - 0.2)
    decs = np.radians(np.array(row["expected"])[:, 1])
    xs, ys = -np.degrees(np.tan(d_ras)), np.degrees(np.tan(decs) / np.cos(d_ras))
    found = np.transpose(solution.ras_decs_deg(xs, ys))
    assert found == pytest.approx(np.array(row["expected"]), abs=row["tolerance"])


def test_the_area_of_a_tan_image(authority):
    # fixtures/authority, tanfield: pyramid with half-angle atan(pi w / 360); recomputed.
    row = authority["tanfield"]
    n, step = row["inputs"]["n_pixels"], row["inputs"]["step_deg"]
    header = SOLVED | {"NAXIS1": n, "NAXIS2": n, "CDELT1": -step, "CDELT2": step}
    header |= {"CRPIX1": (n + 1) / 2, "CRPIX2": (n + 1) / 2}
    assert wcs_footprint(header).area_deg2 == pytest.approx(row["expected"], abs=row["tolerance"])


# astropy.wcs as oracle.


def astropy_corners(header, width, height):
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        return WCS(fits.Header(header), naxis=2).all_pix2world(*corners_px(width, height), 1)


@pytest.mark.parametrize(
    "crval",
    [(10.0, 41.0), (0.05, 0.0), (359.99, -60.0), (0.0, 90.0), (123.0, 89.9), (200.0, -89.99)],
)
@pytest.mark.parametrize(
    "turn",
    [
        {"CROTA2": 30.0},
        {"CROTA2": -170.0, "CDELT2": -5e-4},
        {"PC1_1": 0.6, "PC1_2": -0.8, "PC2_1": 0.8, "PC2_2": 0.6},
        {"LONPOLE": 77.0},
        {"CD1_1": 1e-5, "CD1_2": 5e-4, "CD2_1": 4e-4, "CD2_2": -2e-5},
        {"CUNIT1": "arcsec", "CUNIT2": "arcsec", "CDELT1": -1.8, "CDELT2": 1.8},
    ],
    ids=["crota", "mirrored", "pc", "lonpole", "cd", "arcsec"],
)
def test_corners_agree_with_astropy(crval, turn):
    header = without(SOLVED, "CROTA2") | {"CRVAL1": crval[0], "CRVAL2": crval[1]}
    if "CD1_1" in turn:
        header = without(header, "CDELT1", "CDELT2")
    if "CUNIT1" in turn:
        turn = turn | {"CRVAL1": crval[0] * 3600, "CRVAL2": crval[1] * 3600}
    header |= turn
    expected = astropy_corners(header, 1024, 768)
    found = read_tan_solution(header).ras_decs_deg(*corners_px(1024, 768))
    assert separations_deg(*found, *expected).max() < 1e-9
    outline = wcs_footprint(header)
    nearest = [
        separations_deg(ra, dec, *outline.corners_deg.T).min()
        for ra, dec in zip(*expected, strict=True)
    ]
    assert max(nearest) < 1e-9


def test_a_solution_of_another_equinox_is_turned_to_j2000():
    header = SOLVED | {"RADESYS": "FK5", "EQUINOX": 2027.2}
    ras, decs = astropy_corners(SOLVED, 1024, 768)
    expected = SkyCoord(ras * units.deg, decs * units.deg, frame=FK5(equinox="J2027.2"))
    expected = expected.transform_to(FK5(equinox="J2000"))
    found = read_tan_solution(header).ras_decs_deg(*corners_px(1024, 768))
    # astropy precesses by the angles of Capitaine et al. 2003: 0.15 arcsec until 2030.
    assert separations_deg(*found, expected.ra.deg, expected.dec.deg).max() < 0.15 / 3600


def test_exchanged_axes_agree_with_astropy():
    header = without(SOLVED, "CROTA2", "CDELT1", "CDELT2") | {
        "CTYPE1": "DEC--TAN",
        "CTYPE2": "RA---TAN",
        "CRVAL1": 41.0,
        "CRVAL2": 10.0,
        "CD1_1": 1e-4,
        "CD1_2": 5e-4,
        "CD2_1": -4e-4,
        "CD2_2": 2e-5,
    }
    decs, ras = astropy_corners(header, 1024, 768)
    found = read_tan_solution(header).ras_decs_deg(*corners_px(1024, 768))
    assert separations_deg(*found, ras, decs).max() < 1e-9


# Arcsec: frames whose solution holds nothing that we do not read agree to rounding; the others
# (look-up tables, SCAMP distortion under the name of TAN) to their distortion.
REAL_FRAMES = {
    "1904-66_TAN.hdr": ("maps", 1e-6),
    "defunct_keywords.hdr": ("", 1e-6),
    "ie6d07ujq_wcs.fits": ("", 1e-3),
    "irac_sip.hdr": ("", 1e-6),
    "locale.hdr": ("", 1e-6),
    "sip.fits": ("", 1e-6),
    "sip-broken.hdr": ("", 1e-6),
    "siponly.hdr": ("", 1e-6),
    "tab-time-last-axis.fits": ("", 1e-6),
    "dss.14.29.56-62.41.05.fits.gz": ("", 1.0),
}


@pytest.mark.parametrize("name", REAL_FRAMES)
def test_real_frames_agree_with_astropy(name, real_frame):
    folder, tolerance_arcsec = REAL_FRAMES[name]
    header, file, cards = real_frame(str(Path(folder) / name))
    width, height = cards.get("NAXIS1") or 100, cards.get("NAXIS2") or 100
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        expected = WCS(header, naxis=2, fobj=file).all_pix2world(*corners_px(width, height), 1)
    found = read_tan_solution(cards).ras_decs_deg(*corners_px(width, height))
    assert separations_deg(*found, *expected).max() * 3600 < tolerance_arcsec
