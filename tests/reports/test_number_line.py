from itertools import pairwise

from hypothesis import given
from hypothesis.strategies import floats, integers

from recheck.model import Interval
from recheck.reports.number_line import IMPLIED, MARK, PRINTED, number_line

ONE_HUNDREDTH = (Interval(0.0095, 0.0105),)


def drawn(printed, *implied, columns=44, **more):
    drawing = number_line(printed, implied, columns=columns, **more)
    assert drawing is not None
    return drawing


def test_printed_lies_left_of_alpha_and_implied_right_of_it():
    drawing = drawn(ONE_HUNDREDTH, (Interval(0.062, 0.064),), alpha=0.05, decades=True)
    printed, implied = drawing.tracks
    assert printed.rindex(PRINTED) < printed.index(MARK)
    assert implied.rindex(IMPLIED) > implied.index(MARK)
    assert "alpha 0.05" in drawing.values


def test_alpha_is_left_out_where_it_is_far_away():
    drawing = drawn((Interval(0.8, 0.81),), (Interval(0.82, 0.83),), alpha=0.05, decades=True)
    assert MARK not in "".join(drawing.tracks)
    assert "alpha" not in drawing.values


def test_decades_are_drawn_as_equal_steps():
    drawing = drawn(ONE_HUNDREDTH, (Interval(1e-6, 2e-6),), (Interval(0.5, 0.6),), decades=True)
    ticks = [k for k, character in enumerate(drawing.axis) if character == "┴"]
    assert len(ticks) >= 3
    assert max(b - a for a, b in pairwise(ticks)) - min(b - a for a, b in pairwise(ticks)) <= 1


def test_a_bound_ends_in_an_arrow():
    drawing = drawn((Interval(0.0, 0.05),), (Interval(0.2, 0.21),), (Interval(1e-5, 1e-4),), decades=True)
    assert drawing.tracks[0].startswith("◄█")
    endless = drawn((Interval(1.0, 2.0),), (Interval(3.0, float("inf")),))
    assert endless.tracks[1].endswith("░►")


def test_nothing_is_drawn_where_the_gap_could_not_be_seen():
    assert number_line((Interval(0.10, 0.11),), [(Interval(0.1101, 0.9),)], columns=40) is None
    assert number_line(ONE_HUNDREDTH, [], columns=40) is None
    assert number_line(ONE_HUNDREDTH, [(Interval(0.03, 0.04),)], columns=10) is None


def test_a_far_reading_does_not_hide_the_near_gap():
    drawing = drawn((Interval(2.195, 2.205),), (Interval(2.3, 2.4),), (Interval(500.0, 501.0),))
    assert drawing.tracks[2].endswith("►")


def test_whole_numbers_are_single_marks():
    drawing = drawn((Interval(19.5, 20.5),), tuple(Interval(n, n) for n in (12, 14, 16)))
    assert drawing.tracks[1].count(IMPLIED) == 3


ends = floats(-1e12, 1e12)


@given(a=ends, b=ends, c=ends, d=ends, columns=integers(16, 90))
def test_every_track_has_the_width_asked_for(a, b, c, d, columns):
    printed, implied = Interval(min(a, b), max(a, b)), Interval(min(c, d), max(c, d))
    drawing = number_line((printed,), [(implied,)], columns=columns, alpha=0.05, decades=True)
    if drawing is not None:
        assert {len(drawing.axis), *map(len, drawing.tracks)} == {columns}
        assert len(drawing.values) <= columns
        shared = [PRINTED in pair and IMPLIED in pair for pair in zip(*drawing.tracks, strict=True)]
        assert printed.meets(implied) or not any(shared)


@given(p=floats(1e-300, 1.0), q=floats(1e-300, 1.0))
def test_any_two_p_values_can_be_drawn(p, q):
    number_line((Interval(p, p),), [(Interval(q, q),)], columns=44, alpha=0.05, decades=True)
