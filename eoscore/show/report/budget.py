"""Where the uncertainty of each answer comes from: the shares of the variance as bars."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.show.report.markup import Markup, element, together

if TYPE_CHECKING:
    from eoscore.answer.record import Finding, FoundAnswer

__all__ = ["budgets"]

_SMALLEST = 0.005  # shares below are not told


def budgets(answer: FoundAnswer) -> Markup:
    """Bars for every quantity with an uncertain input; equal budgets are drawn once."""
    told: dict[tuple[tuple[str, int], ...], list[str]] = {}
    for name, finding in answer.found.items():
        if shares := _shares(finding):
            told.setdefault(shares, []).append(name)
    return together(*(_bars(names, shares) for shares, names in told.items()))


def _shares(finding: Finding) -> tuple[tuple[str, int], ...]:
    """Inputs with their largest share among the entries, in percent, the largest first."""
    shares = {}
    for name, share in finding.budget.items():
        known = share[np.isfinite(share)]
        if known.size and known.max() >= _SMALLEST:
            shares[name] = round(100.0 * float(known.max()))
    return tuple(sorted(shares.items(), key=lambda item: -item[1]))


def _bars(names: list[str], shares: tuple[tuple[str, int], ...]) -> Markup:
    rows = [
        element(
            "tr",
            element("th", element("code", name), scope="row"),
            element(
                "td", element("span", class_="bar", style=f"width:{percent * 0.6:.1f}%"), f" {percent} %"
            ),
        )
        for name, percent in shares
    ]
    caption = element("caption", f"Uncertainty budget of {', '.join(names)}: share of the variance by input")
    heads = element("tr", element("th", "input", scope="col"), element("th", "share", scope="col"))
    return element("table", caption, element("thead", heads), element("tbody", *rows), class_="budget")
