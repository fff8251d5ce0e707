"""The trap in cuts and contour maps, with its bottom, its escape point and the density of the cloud over it."""

from __future__ import annotations

from itertools import combinations
from math import inf
from typing import TYPE_CHECKING

from eoscore.constants import K_B
from eoscore.show.prefix import quantity
from eoscore.show.report.cloud import Cloud
from eoscore.show.report.contours import Contours
from eoscore.show.report.cut import Cut
from eoscore.show.report.view import views_of
from eoscore.show.report.way_out import way_out

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.show.report.markup import Markup
    from eoscore.show.report.picture import Gallery
    from eoscore.show.report.subject import Subject
    from eoscore.show.report.view import View

__all__ = ["trap_pictures"]


def trap_pictures(subject: Subject, gallery: Gallery) -> Iterator[Markup]:
    """A cut along every coordinate and a map of every pair, through the bottom; the cloud closely; where it leaks."""
    views = [] if subject.trap is None else list(views_of(subject.trap, subject.temperature))
    for number, view in enumerate(views):
        cloud = Cloud(subject, view)
        close = " close to the cloud" if number else ""
        names = view.trap.field.coordinates
        for place, name in enumerate(names if not number else ()):
            cut = Cut(view, cloud, place)
            words = f"{_cut_words(subject, cut)}{cloud.words}"
            yield gallery.draw(f"{subject.name}: cut along {name}", words, cut)
        for pair in combinations(range(len(names)), 2):
            drawn = Contours(view, cloud, pair)
            title = f"{subject.name}: map of {names[pair[0]]} and {names[pair[1]]}{close}"
            yield gallery.draw(title, f"{drawn.words}{cloud.map_words}", drawn)
    for view in views:
        if view.energy == view.trap.top:
            yield from _leak(subject, view, gallery)


def _leak(subject: Subject, view: View, gallery: Gallery) -> Iterator[Markup]:
    out = way_out(view)
    if out is not None:
        drawn = Contours(out.view, None, out.pair)
        title = f"{subject.name}: where it leaks, in {drawn.names[0]} and {drawn.names[1]}"
        yield gallery.draw(title, drawn.words, drawn)


def _cut_words(subject: Subject, cut: Cut) -> str:
    trap = cut.view.trap
    at = quantity(trap.r_min[cut.place], "m")
    depth = (
        "the place holds at every energy"
        if trap.top == inf
        else f"the escape energy is k_B times {quantity(trap.top / K_B, 'K')}"
    )
    cloud = f", kT dotted ({quantity(subject.temperature, 'K')})" if subject.temperature else ""
    walls = " Hatched: behind walls." if cut.walled else ""
    return f"Line: V through the bottom (plus sign at {cut.name} = {at}); {depth}{cloud}.{walls}"
