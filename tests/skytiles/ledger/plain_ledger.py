"""The definition of the ledger once more, straight from its formulas, slow and plain.

Imports nothing of skytiles: it is the other side of the comparison.
"""

import math


def brightness(hypothesis, t_d):
    since = t_d - hypothesis["first_light_d"]
    if since < 0.0:
        return math.inf
    if since <= 0.01:
        return hypothesis["m_first"]
    if since <= hypothesis["rise_d"]:
        climbed = math.log10(since / 0.01) / math.log10(hypothesis["rise_d"] / 0.01)
        return hypothesis["m_first"] + (hypothesis["m_peak"] - hypothesis["m_first"]) * climbed
    return hypothesis["m_peak"] + hypothesis["slope"] * (since - hypothesis["rise_d"])


def efficiency(frame, magnitude):
    if magnitude > frame["m_eff"] + 3.0 * frame["s"]:
        return 0.0
    found = 1.0 / (1.0 + math.exp((magnitude - frame["m_eff"]) / frame["s"]))
    if frame["masks"] and frame["m_sat"] is not None:
        found /= 1.0 + math.exp((frame["m_sat"] - magnitude) / 0.2)
    return found


def apart_deg(one, other):
    def vector(frame):
        ra, dec = math.radians(frame["ra"]), math.radians(frame["dec"])
        return (math.cos(dec) * math.cos(ra), math.cos(dec) * math.sin(ra), math.sin(dec))

    a, b = vector(one), vector(other)
    cross = (
        a[1] * b[2] - a[2] * b[1],
        a[2] * b[0] - a[0] * b[2],
        a[0] * b[1] - a[1] * b[0],
    )
    return math.degrees(
        math.atan2(math.hypot(*cross), sum(x * y for x, y in zip(a, b, strict=True)))
    )


def looks_of(frames):
    looks = []
    able = [frame for frame in frames if frame["examined"] and frame["m_eff"] is not None]
    for frame in sorted(able, key=lambda f: (f["t_d"], f["key"])):
        for look in looks:
            first = look[0]
            is_same = first["instrument"] == frame["instrument"]
            is_soon = frame["t_d"] - first["t_d"] <= 1.0 / 24.0
            if is_same and is_soon and apart_deg(first, frame) <= first["field_deg"] / 2.0:
                look.append(frame)
                break
        else:
            looks.append([frame])
    return looks


def look_finds(look, pixel, hypothesis, offset):
    unseen = 1.0
    for frame in look:
        share = frame["covers"].get(pixel, 0.0)
        unseen *= 1.0 - share * efficiency(frame, brightness(hypothesis, frame["t_d"]) + offset)
    return max(frame["c"] for frame in look) * (1.0 - unseen)


def detected(case, pixel, looks):
    total = 0.0
    for hypothesis in case["hypotheses"]:
        for offset, weight in zip(case["b"], case["q"][pixel], strict=True):
            missed = 1.0
            for look in looks:
                missed *= 1.0 - look_finds(look, pixel, hypothesis, offset)
            total += hypothesis["w"] * weight * (1.0 - missed)
    return (1.0 - case["u"][pixel]) * total


def account(case, frames):
    looks = looks_of(frames)
    found = [detected(case, pixel, looks) for pixel in range(len(case["p"]))]
    searched = sum(p * d for p, d in zip(case["p"], found, strict=True))
    imaged = sum(
        p for pixel, p in enumerate(case["p"]) if any(pixel in frame["covers"] for frame in frames)
    )
    return {
        "D": found,
        "searched": searched,
        "imaged": imaged,
        "residual": [
            p * (1.0 - d) / (1.0 - searched) for p, d in zip(case["p"], found, strict=True)
        ],
        "residual_outside": case["outside"] / (1.0 - searched),
        "n_looks": len(looks),
    }
