"""Real frames: headers of astropy's own test data."""

import gzip
import warnings
from pathlib import Path

import astropy.wcs
from astropy.io import fits

REAL = Path(astropy.wcs.__file__).parent / "tests" / "data"


def real_frame(name):
    """A file of astropy's own test data: its header, its extensions, and plain cards as sent."""
    data = (REAL / name).read_bytes()
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        if name.endswith(".hdr"):
            header, file = fits.Header.fromstring(data.decode("latin1")), fits.HDUList()
        else:
            plain = gzip.decompress(data) if name.endswith(".gz") else data
            file = fits.HDUList.fromstring(plain)
            header = next(hdu.header for hdu in file if "CTYPE1" in hdu.header)
    return header, file, dict(_plain_cards(header))


def _plain_cards(header):
    for keyword in header:
        try:
            value = header[keyword]
        except fits.VerifyError:
            continue
        if isinstance(value, (str, int, float)) and keyword not in ("COMMENT", "HISTORY", ""):
            yield keyword, value
