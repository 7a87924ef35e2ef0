"""Finding places for texts: beside the axes pushed apart, or inside them where nothing is covered.

Boxes are (left, bottom, right, top) in points from the axes' lower left corner.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import NamedTuple

import numpy as np

GAP = 2.0  # points between a text and what it names
FARTHER = (0, 7, 14)  # more points from a marker to its name; with a leader from the second on


class Candidate(NamedTuple):
    """A place for a text: its box, how unwelcome it is (in covered curve points), and a leader's two ends or None."""

    box: tuple[float, float, float, float]
    cost: float
    leader: tuple | None = None


@dataclass
class Places:
    """What is taken inside axes of ``width`` x ``height`` points: text and marker boxes, and curves as dense points."""

    width: float
    height: float
    boxes: list = field(default_factory=list)
    curves: list = field(default_factory=list)

    def add_curve(self, x, y):
        """Keep texts off a curve given in points; gaps (NaN) stay gaps."""
        dense = dense_path(x, y)
        inside = (
            (dense[:, 0] > -1) & (dense[:, 0] < self.width + 1) & (dense[:, 1] > -1) & (dense[:, 1] < self.height + 1)
        )
        self.curves.append(dense[inside])

    def add_wall(self, box):
        """Keep texts off a marker, or off a rule: a name across another rule would read as that rule's."""
        self.boxes.append(box)

    def take(self, candidates):
        """The candidate that covers least, as (box, leader, covers anything); None when all are taken."""
        curves = np.concatenate(self.curves) if self.curves else np.empty((0, 2))
        free = [c for c in candidates if self._is_free(c.box)]
        if not free:
            return None
        covered = [_covered(c.box, curves) for c in free]
        costs = [c.cost + n + self._leader_cost(c, curves) for c, n in zip(free, covered, strict=True)]
        best = int(np.argmin(costs))
        self.boxes.append(free[best].box)
        return free[best].box, free[best].leader, covered[best] > 0

    def _is_free(self, box):
        left, bottom, right, top = box[0] - 1, box[1] - 1, box[2] + 1, box[3] + 1
        if not (left >= 0 and bottom >= 0 and right <= self.width and top <= self.height):
            return False
        return not any(left < b[2] and b[0] < right and bottom < b[3] and b[1] < top for b in self.boxes)

    def _leader_cost(self, candidate, curves):
        """A line from a marker to its name should cross neither curves nor names."""
        if candidate.leader is None:
            return 0
        path = dense_path(*np.transpose(candidate.leader), step=1.0)
        near_curves = np.any(np.hypot(*(path[:, None] - curves).transpose(2, 0, 1)) < 1, axis=1)
        return 2 * near_curves.sum() + 15 * sum(_covered(box, path) > 0 for box in self.boxes)


def _covered(box, points):
    x, y = points[:, 0], points[:, 1]
    return int(np.sum((x > box[0] - 1) & (x < box[2] + 1) & (y > box[1] - 1) & (y < box[3] + 1)))


def dense_path(x, y, step=2.0):
    """Points (n, 2) at most ``step`` apart along a curve, without its gaps."""
    x, y = np.asarray(x, float), np.asarray(y, float)
    whole = np.isfinite(x) & np.isfinite(y)
    pairs = np.flatnonzero(whole[:-1] & whole[1:])
    parts = [np.column_stack([x[whole], y[whole]])]
    for i in pairs:
        length = np.hypot(x[i + 1] - x[i], y[i + 1] - y[i])
        share = np.linspace(0, 1, int(min(length / step, 2000)) + 2)[1:-1]
        parts.append(np.column_stack([x[i] + share * (x[i + 1] - x[i]), y[i] + share * (y[i + 1] - y[i])]))
    return np.concatenate(parts)


def push_apart(wanted, heights, low, high):
    """Centres near ``wanted`` (any order) whose intervals of the given heights do not overlap within low..high.

    Neighbours that collide become one block around their mean wish, until no blocks collide.
    """
    order = np.argsort(wanted, kind="stable")
    blocks = []
    for i in order:
        blocks.append(_block([i], wanted, heights, low, high))
        while len(blocks) > 1 and blocks[-2][1] > blocks[-1][0] + 1e-9:
            blocks[-2:] = [_block(blocks[-2][2] + blocks[-1][2], wanted, heights, low, high)]
    centres = np.empty(len(order))
    for bottom, _, members in blocks:
        for i in members:
            centres[i] = bottom + heights[i] / 2
            bottom += heights[i]
    return centres


def _block(members, wanted, heights, low, high):
    """(bottom, top, members) of intervals stacked in order, placed so that the mean distance to the wishes is zero."""
    total = sum(heights[i] for i in members)
    starts = np.cumsum([0.0] + [heights[i] for i in members[:-1]])
    shift = np.mean([wanted[i] - heights[i] / 2 - start for i, start in zip(members, starts, strict=True)])
    bottom = float(np.clip(shift, low, max(low, high - total)))
    return bottom, bottom + total, members


def _boxes(corners, size, start=0.0, step=0.5):
    """Candidates with these lower left corners, each a little less welcome than the one before."""
    w, h = size
    return [Candidate((x, y, x + w, y + h), start + step * i) for i, (x, y) in enumerate(corners)]


def around_point(x, y, size, reach):
    """Places around a marker of radius ``reach``: right, left, above, below, diagonal; then farther, with a leader."""
    w, h = size
    found = []
    for far in FARTHER:
        d = reach + GAP + far
        sides = [(d, -h / 2), (-d - w, -h / 2), (-w / 2, d), (-w / 2, -d - h)]
        corners = [(d, d), (-d - w, d), (d, -d - h), (-d - w, -d - h)]
        ring = _boxes([(x + dx, y + dy) for dx, dy in sides + corners], size, start=far)
        found += [c._replace(leader=_leader(x, y, c.box, reach)) if far else c for c in ring]
    return found


def _leader(x, y, box, reach):
    """From the rim of a marker to the nearest point of a box: ((x, y), (x, y))."""
    end = np.array([np.clip(x, box[0], box[2]), np.clip(y, box[1], box[3])])
    start = np.array([x, y])
    return tuple(start + (end - start) * reach / np.hypot(*(end - start))), tuple(end)


def along_path(x, y, size):
    """Places beside a curve, from its end to its start, with a corner or an edge close to it."""
    w, h = size
    path = dense_path(x, y)
    near = [path[round(share * (len(path) - 1))] for share in (1.0, 0.9, 0.8, 0.65, 0.5, 0.35, 0.2, 0.1, 0.0)]
    steps = [(dx, dy) for dy in (GAP, -h - GAP) for dx in (GAP, -w - GAP, -w / 2)]
    return _boxes([(px + dx, py + dy) for px, py in near for dx, dy in steps], size, step=0.05)


def on_path(x, y, size):
    """Places centred on a curve, from its middle outwards."""
    w, h = size
    path = dense_path(x, y)
    centres = [path[round(share * (len(path) - 1))] for share in (0.5, 0.35, 0.65, 0.2, 0.8, 0.1, 0.9)]
    return _boxes([(px - w / 2, py - h / 2) for px, py in centres], size)


def beside_rule(at, size, length, upright):
    """Places on both sides of a rule at ``at``, from its far end; ``upright`` rules run from bottom to top."""
    across, along = size if upright else size[::-1]
    starts = [GAP + share * (length - along - 2 * GAP) for share in (1.0, 0.0, 0.75, 0.25, 0.5)]
    corners = [(at + side, start) for start in starts for side in (GAP, -GAP - across)]
    return _boxes(corners if upright else [(x, y) for y, x in corners], size)


def within(left, bottom, right, top, size):
    """Places inside a rectangle, top middle first; none when it is too small."""
    w, h = size
    if not (right - left >= w + 2 * GAP and top - bottom >= h + 2 * GAP):
        return []
    lefts = [left + GAP + share * (right - left - w - 2 * GAP) for share in (0.5, 0.0, 1.0)]
    bottoms = [bottom + GAP + share * (top - bottom - h - 2 * GAP) for share in (1.0, 0.0, 0.5, 0.75, 0.25)]
    return _boxes([(x, y) for y in bottoms for x in lefts], size)
