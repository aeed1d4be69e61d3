"""What this pump has shown: notes as bounds on S, what is proven, and what is believed of its limit.

S is learned in ln S on a grid. A *held* note bounds it from below, a *let go* note from above; *flared* (the
revs ran up, it did not let go) bounds the limit from below and the flare line from above.
"""

import math
from collections.abc import Callable, Iterable, Sequence
from math import erfc, exp
from typing import NamedTuple

from headwater.suction import S_FROM_DIMENSIONLESS

# Prior: ln omega_ss uniform, deliberately wide, so that it never makes a go by itself [P].
PRIOR_LOW, PRIOR_HIGH = math.log(2 * S_FROM_DIMENSIONLESS), math.log(30 * S_FROM_DIMENSIONLESS)
GRID = 400
_DRAG_GRID = 161
OLDER_SIGMA = 0.25  # one sigma in ln S of a note of an older pump set-up [P]
FLARE_RATIO = 1.25  # NPSH ratio of the flare line while none has been seen [P]
FLARE_EASE = 0.90  # of the lowest flared rpm, where nothing has held yet [P]
DISAGREE_SIGMAS = 1.96  # joint spreads by which notes must cross to contradict each other
TOO_GOOD_SIGMAS = 3.0  # joint spreads by which a launch may tell of less drag than the prior [P]
_ROOT_HALF = math.sqrt(0.5)
_ROOT_TWO_PI = math.sqrt(2 * math.pi)
_CELLS_A_SIGMA = 2  # to which a blur is resolved
_FAR = 5.5  # sigmas of a blur beyond which a cell is wholly under or over
_WINDOW = 4.0  # sigmas beyond which a bound is taken as certain


class Bound(NamedTuple):
    """One note as a bound on ln S."""

    note: int  # which note
    x: float  # ln S_note
    sigma: float  # one sigma in ln S, for the state asked about
    below: bool  # bounds from below (the pump held at x) or from above
    hint: bool  # of an older pump set-up: it never proves, bounds or stops


class Belief:
    """A distribution of ln S on an even grid, made by :func:`learn`."""

    def __init__(self, start: float, step: float, weights: Sequence[float]) -> None:
        total = sum(weights)
        self.start, self.step = start, step
        self.weights = [weight / total for weight in weights]
        cumulative, self.below = 0.0, [0.0]
        for weight in self.weights:
            cumulative += weight
            self.below.append(cumulative)

    def quantile(self, share: float) -> float:
        """ln S with this share of the belief under it; each grid point is a cell one step wide."""
        low, high = 0, len(self.weights)
        while high - low > 1:
            middle = (low + high) // 2
            low, high = (middle, high) if self.below[middle] <= share else (low, middle)
        return self.start + (low - 0.5 + (share - self.below[low]) / self.weights[low]) * self.step

    def chance_under(self, x: float, sigma: float) -> float:
        """Chance that ln S lies under x, where x itself is known to one sigma."""
        return self._chance_and_density(x, sigma)[0]

    def x_at_chance(self, chance: float, sigma: float) -> float:
        """The x with this chance under it: :meth:`chance_under` solved by Newton's method."""
        x = self.quantile(chance)
        for _ in range(20):
            under, density = self._chance_and_density(x, sigma)
            move = min(max(math.log(under / chance) * under / density, -2 * sigma), 2 * sigma + self.step)
            x -= move
            if abs(move) < 1e-4:  # the next step would be its square
                break
        return x

    def _chance_and_density(self, x: float, sigma: float) -> tuple[float, float]:
        stride = max(
            int(sigma / self.step / _CELLS_A_SIGMA), 1
        )  # cells taken together where x is blurred wide
        last = len(self.weights)
        k = min(max(int((x - _FAR * sigma - self.start) / self.step) // stride * stride, 0), last)
        end = min(int((x + _FAR * sigma - self.start) / self.step) + 1, last)
        z = (x - self.start - (k + 0.5 * (stride - 1)) * self.step) / sigma
        under, density, done = 2 * self.below[k], 1e-300, self.below[k]
        while k < end:
            k += stride
            reached = self.below[k if k < last else last]
            weight, done = reached - done, reached
            under += weight * erfc(-z * _ROOT_HALF)
            density += weight * exp(-0.5 * z * z)
            z -= stride * self.step / sigma
        return max(0.5 * under, 1e-300), density / (sigma * _ROOT_TWO_PI)


def learn(bounds: Iterable[Bound]) -> Belief:
    """Posterior of ln S: the prior times each note's likelihood, on a grid of 400 points.

    Source: Bayes' rule with normal scatter of each note [D]; the prior [P].
    """
    bounds = list(bounds)
    top = max([PRIOR_HIGH, *(bound.x + 1 for bound in bounds)])  # e times the largest S_note at the least
    bottom = min(
        [PRIOR_LOW, *(bound.x - 1 for bound in bounds if bound.x < PRIOR_LOW)]
    )  # no note falls outside
    step = (top - bottom) / (GRID - 1)
    spans = []
    first, last = 0, GRID - 1
    for bound in bounds:
        reach = _WINDOW * bound.sigma
        low = math.ceil((bound.x - reach - bottom) / step)
        high = math.floor((bound.x + reach - bottom) / step)
        spans.append((bound, low, high))
        if bound.below:
            first = max(first, min(low, GRID - 1))
        else:
            last = min(last, max(high, 0))
    if first > last:  # notes that cross by many sigmas: all that is left is the point between them
        first = last = (first + last) // 2
    weights = [1.0] * (last - first + 1)
    for bound, low, high in spans:
        scale = _ROOT_HALF / (bound.sigma if bound.below else -bound.sigma)
        offset = bottom - bound.x
        for k in range(max(low, first), min(high, last) + 1):
            weights[k - first] *= 0.5 * erfc(-(offset + k * step) * scale)
    return Belief(bottom + first * step, step, [weight + 1e-300 for weight in weights])


def followed(belief: Belief, bounds: Sequence[Bound], shares: Sequence[float]) -> list[list[float]]:
    """How far each quantile of a belief follows each bound it was learned from, d quantile / d x.

    :param shares: of the quantiles
    :returns: for each quantile one number a bound
    Source: derivative of the posterior's distribution function over its density [D].
    """
    start, step, weights = belief.start, belief.step, belief.weights
    last = len(weights) - 1
    cells = []  # where each quantile lies: its cell, how much of it is under the quantile, the weight there
    for share in shares:
        cell = (belief.quantile(share) - start) / step + 0.5
        whole = min(max(int(cell), 0), last)
        part = cell - whole
        beside = weights[min(whole + 1, last) if part > 0.5 else max(whole - 1, 0)]
        weight = weights[whole] + abs(part - 0.5) * (beside - weights[whole])
        cells.append((share, whole, part, weight))
    rows: list[list[float]] = [[] for _ in shares]
    for bound in bounds:
        low = max(math.ceil((bound.x - _WINDOW * bound.sigma - start) / step), 0)
        high = min(math.floor((bound.x + _WINDOW * bound.sigma - start) / step), last)
        side = 1.0 if bound.below else -1.0
        # By how much each cell's likelihood falls as the bound moves up, on end.
        z, dz = (start + low * step - bound.x) / bound.sigma, step / bound.sigma
        pulls, pulled = [], [0.0]
        for k in range(low, high + 1):
            lost = side * weights[k] * exp(-0.5 * z * z) / (erfc(-side * z * _ROOT_HALF) + 1e-300)
            pulls.append(lost)
            pulled.append(pulled[-1] + lost)
            z += dz
        scale = math.sqrt(2 / math.pi) * step / bound.sigma
        for row, (share, whole, part, weight) in zip(rows, cells, strict=True):
            k = min(max(whole - low, 0), len(pulls))
            under = pulled[k] + (part * pulls[k] if whole >= low and k < len(pulls) else 0.0)
            row.append(scale * (under - share * pulled[-1]) / weight)
    return rows


def lowest_above(bounds: Iterable[Bound]) -> Bound | None:
    """The lowest bound from above of today's set-up."""
    above = [bound for bound in bounds if not (bound.below or bound.hint)]
    return min(above, key=lambda bound: bound.x) if above else None


def contradiction(bounds: Sequence[Bound], apart: Callable[[int, int], float]) -> tuple[int, int] | None:
    """The bound from below that most contradicts one from above, and that one, by note; or none.

    :param bounds: of today's set-up, with their own scatter
    :param apart: one sigma in ln S between two notes that saw different blade angles
    """
    found = []
    for above in (bound for bound in bounds if not bound.below):
        for below in (bound for bound in bounds if bound.below and bound.x > above.x):
            joint = math.hypot(below.sigma, above.sigma, apart(below.note, above.note))
            if below.x - above.x > DISAGREE_SIGMAS * joint:
                found.append((below.x - above.x, below.note, above.note))
    return max(found)[1:] if found else None


def crossed(bounds: Sequence[Bound]) -> set[int]:
    """Notes that bound from below over the lowest bound from above; contradicted, they prove nothing."""
    lid = lowest_above(bounds)
    return {bound.note for bound in bounds if lid and bound.below and bound.x > lid.x}


# The drag of the hull, learned from launches in the same way


class Mark(NamedTuple):
    """One launch as a measure of ln allowance on the drag, or as a bound on it from below."""

    x: float  # ln allowance
    sigma: float  # one sigma
    measured: bool  # she planed in so many seconds; else she would not plane, and it is a bound

    def too_good(self, prior: tuple[float, float, float]) -> bool:
        """Whether it tells of less drag than a hull can have: then a reading is off, and it tells nothing."""
        low, middle, _ = (math.log(value) for value in prior)
        joint = math.hypot(self.sigma, (middle - low) / DISAGREE_SIGMAS)
        return self.measured and middle - self.x > TOO_GOOD_SIGMAS * joint


def learn_allowance(prior: tuple[float, float, float], marks: Sequence[Mark]) -> Belief:
    """Posterior of ln allowance: a two-piece normal prior times each launch's likelihood, on a grid.

    :param prior: low, middle and high of its 95 % span, as an allowance
    Source: Bayes' rule with normal scatter [D]; the prior [P].
    """
    low, middle, high = (math.log(value) for value in prior)
    start = min([low, *(mark.x for mark in marks)]) - 0.5
    step = (max([high, *(mark.x for mark in marks)]) + 0.5 - start) / (_DRAG_GRID - 1)
    weights = []
    for k in range(_DRAG_GRID):
        x = start + k * step
        spread = (high - middle if x > middle else middle - low) / DISAGREE_SIGMAS
        weight = exp(-0.5 * ((x - middle) / spread) ** 2)
        for mark in marks:
            z = (x - mark.x) / mark.sigma
            weight *= exp(-0.5 * z * z) if mark.measured else 0.5 * erfc(-z * _ROOT_HALF)
        weights.append(weight + 1e-300)
    return Belief(start, step, weights)


def allowance_followed(prior: tuple[float, float, float], marks: Sequence[Mark], share: float) -> list[float]:
    """How far a quantile of the allowance follows each launch, d quantile / d x, by learning with it moved.

    :param prior: as for :func:`learn_allowance`
    :param share: of the quantile
    """
    found = []
    for i, mark in enumerate(marks):
        down, up = (
            learn_allowance(prior, [*marks[:i], mark._replace(x=mark.x + side * mark.sigma), *marks[i + 1 :]])
            for side in (-0.5, 0.5)
        )
        found.append((up.quantile(share) - down.quantile(share)) / mark.sigma)
    return found
