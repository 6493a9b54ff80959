import base64

import numpy as np
import orjson

from campaigns.live.messages import coverage_text, heartbeat_text


def test_changed_pixels_travel_as_little_endian_numbers():
    text = coverage_text(
        since_seq=3,
        through_seq=5,
        imaged=0.5,
        searched=0.25,
        residual_outside=0.1,
        at="2027-03-14T05:06:07Z",
        indices=np.array([1, 70_000]),
        detected=np.array([7, 255], dtype=np.uint8),
    )
    message = orjson.loads(text)
    assert (message["since_seq"], message["through_seq"]) == (3, 5)
    indices = base64.b64decode(message["changed"]["indices_b64"])
    assert indices == bytes([1, 0, 0, 0, 0x70, 0x11, 1, 0])
    assert base64.b64decode(message["changed"]["detected_b64"]) == bytes([7, 255])


def test_a_heartbeat_carries_the_newest_number():
    message = orjson.loads(heartbeat_text(seq=41, now="2027-03-14T05:06:07Z"))
    assert message == {"type": "heartbeat", "seq": 41, "now": "2027-03-14T05:06:07Z"}
