"""Figures as data: one function a figure, from an Outcome to a Chart."""

from massdash.charts.energy import energy_chart
from massdash.charts.lifetimes import lifetime_chart
from massdash.charts.margin import margin_chart
from massdash.charts.margin_map import margin_map
from massdash.charts.roads import roads_chart, roads_over_beta

#: The figures of the dashboard by key, in the order in which they are shown.
CHARTS = {"energy": energy_chart, "margin": margin_chart, "map": margin_map, "lifetimes": lifetime_chart}

#: All figures that are written to files: those of the dashboard, then those that show the methods behind it.
PRINTED = CHARTS | {"roads": roads_chart, "roads_beta": roads_over_beta}

#: Figures that take ``post_newtonian=True`` to draw that approximation over full relativity.
OVERLAID = ("energy", "margin", "map")


def all_charts(outcome):
    """Every figure of an Outcome, in order."""
    return tuple(make(outcome) for make in PRINTED.values())


__all__ = [
    "CHARTS",
    "OVERLAID",
    "PRINTED",
    "all_charts",
    "energy_chart",
    "lifetime_chart",
    "margin_chart",
    "margin_map",
    "roads_chart",
    "roads_over_beta",
]
