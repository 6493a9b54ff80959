"""Order of what happens, by the campaign's clock alone."""

from campaigns.rehearsal.timeline import Timeline


async def _nothing() -> None:
    return None


def _named(name):
    async def happening() -> None:
        return None

    happening.__name__ = name
    return happening


def _names(timeline, until_s):
    names = []
    while happening := timeline.take_next(until_s):
        names.append(happening.__name__)
    return names


def test_happenings_come_in_time_order_and_equal_times_in_order_of_entry():
    timeline = Timeline()
    for time_s, name in [(30.0, "c"), (10.0, "a"), (30.0, "d"), (10.4, "b")]:
        timeline.at(time_s, _named(name))
    assert _names(timeline, 100.0) == ["a", "b", "c", "d"]


def test_nothing_happens_after_the_end():
    timeline = Timeline()
    timeline.at(11.0, _nothing)
    assert timeline.take_next(10.0) is None


def test_nothing_is_entered_in_the_past():
    timeline = Timeline()
    timeline.at(50.0, _nothing)
    timeline.take_next(100.0)
    timeline.at(20.0, _named("late"))
    timeline.after(-5.0, _named("later"))
    assert _names(timeline, 100.0) == ["late", "later"]
    assert timeline.now_s == 50.0
