"""Two thousand damaged files for each reader: a named problem or an alert, nothing else."""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from skytiles.errors import SkytilesError
from skytiles.region.read_alert import read_alert
from skytiles.region.read_moc import moc_from_ascii, read_moc
from skytiles.region.read_voevent import read_voevent
from tests.skytiles.region.damage import NOW, outcomes, whole_files
from tests.skytiles.region.voevent_words import packet, where_when

READERS = ("voevent", "our json", "moc text", "moc json", "moc fits", "map fits")
N_FILES = 2000


@pytest.fixture(scope="module")
def files(alerts_folder):
    return whole_files(alerts_folder)


@pytest.mark.parametrize("reader", READERS)
def test_whole_files_are_read(files, reader):
    for data in files[reader]:
        assert read_alert(data, filename="whole", now_mjd=NOW).identifier


@pytest.mark.parametrize("reader", READERS)
def test_damaged_files_are_refused_in_words(files, reader):
    n_read, n_refused = outcomes(files[reader], n_files=N_FILES, seed=7)
    assert n_read + n_refused == N_FILES
    # The damage is real, and it is not so coarse that every file falls at the first check.
    assert n_refused > N_FILES // 10
    assert n_read > 0


def share_or_advice(reader, given):
    """In words: the share of the sky, or what the refusal advises."""
    try:
        share = reader(given).sky_share
    except SkytilesError as refusal:
        return refusal.advice
    return f"{share}" if 0.0 <= share <= 1.0 else ""


ANYTHING = st.text(max_size=60) | st.sampled_from(
    ["1e5", "-0", "nan", " 12 ", "RA", "<a/>", "&#0;"]
)


@settings(deadline=None, max_examples=150)
@given(
    system=ANYTHING, time=ANYTHING, ra=ANYTHING, dec=ANYTHING, error=ANYTHING, role=ANYTHING,
    version=st.sampled_from(["2.0", "2.1"]), more=ANYTHING,
)  # fmt: skip
def test_any_words_in_a_message_give_an_alert_or_a_clear_refusal(
    system, time, ra, dec, error, role, version, more
):
    words = where_when(system=system, time=time, ra=ra, dec=dec, error=f"<Error2>{error}</Error2>")
    data = packet(words, f"<Why importance='1'>{more}</Why>", version=version, role=role)
    try:
        outcome = read_voevent(data, now_mjd=NOW).identifier
    except SkytilesError as refusal:
        outcome = refusal.advice
    assert outcome


@settings(deadline=None, max_examples=150)
@given(st.text(alphabet="0123456789/-s, \n", max_size=60) | st.text(max_size=40))
def test_any_text_is_a_coverage_map_or_a_clear_refusal(text):
    assert share_or_advice(moc_from_ascii, text)


@settings(deadline=None, max_examples=150)
@given(st.binary(max_size=200))
def test_any_bytes_are_a_coverage_map_or_a_clear_refusal(data):
    assert share_or_advice(read_moc, data)
