"""Where a function of one number is nought: polynomials in an interval, and functions that are sampled.

Owns the search for roots, double ones included. Imports nothing of ours and no library: it runs for every leg.

Polynomials are tuples of coefficients, the constant first.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from itertools import pairwise

Polynomial = tuple[float, ...]
Function = Callable[[float], float]

# A polynomial that turns back this near to nought, against the size of its terms, counts as touching it. It is wider
# than rounding, since whoever asks looks the root over.
TOUCHES = 1e-10
_EPSILON = 2.3e-16
_MOST_STEPS = 120
_GOLDEN = (math.sqrt(5) - 1) / 2
_GOLDEN_STEPS = 44  # down to 1e-9 of the interval, where a smooth minimum is flat to the last bit


class Flat(Exception):  # noqa: N818  (not an error: a finding)
    """The function is nought over a stretch, not at a point."""


def value(p: Polynomial, x: float) -> float:
    """The polynomial at x (Horner)."""
    total = 0.0
    for coefficient in reversed(p):
        total = total * x + coefficient
    return total


def plus(p: Polynomial, q: Polynomial, times: float = 1.0) -> Polynomial:
    """p + times q."""
    length = max(len(p), len(q))
    padded = (list(p) + [0.0] * (length - len(p)), list(q) + [0.0] * (length - len(q)))
    return tuple(a + times * b for a, b in zip(*padded, strict=True))


def product(p: Polynomial, q: Polynomial) -> Polynomial:
    """p q."""
    total = [0.0] * (len(p) + len(q) - 1)
    for i, a in enumerate(p):
        for j, b in enumerate(q):
            total[i + j] += a * b
    return tuple(total)


def along(p: Polynomial, start: float, step: float) -> Polynomial:
    """The polynomial of s that p(start + step s) is."""
    total: Polynomial = (0.0,)
    for coefficient in reversed(p):
        total = plus(product(total, (start, step)), (coefficient,))
    return total[: len(p)]


def real_roots(p: Polynomial, low: float, high: float) -> list[float]:
    """Roots from `low` to `high`, ascending, a double one once; none where p is nought throughout.

    Between two places where it turns back a polynomial has at most one root; those places are roots of its derivative.
    """
    if len(p) < 2 or not any(p):
        return []
    if len(p) == 2:
        root = -p[0] / p[1] if p[1] else math.inf
        return [root] if low <= root <= high else []
    derivative = tuple(k * c for k, c in enumerate(p))[1:]
    reach = max(abs(low), abs(high), 1.0)
    touch = TOUCHES * sum(abs(c) * reach**k for k, c in enumerate(p))
    stops = [low, *real_roots(derivative, low, high), high]
    return sorted(_between_stops(lambda x: value(p, x), stops, [value(p, x) for x in stops], touch))


def _between_stops(f: Function, stops: Sequence[float], values: Sequence[float], touch: float) -> list[float]:
    found = [x for x, y in zip(stops, values, strict=True) if y == 0.0]
    for (a, fa), (b, fb) in pairwise(zip(stops, values, strict=True)):
        if fa * fb < 0.0:
            found.append(bracketed(f, a, b, fa, fb))
    for before, here, after, x in zip(values, values[1:], values[2:], stops[1:], strict=False):
        if 0.0 < abs(here) <= touch and before * here > 0.0 and here * after > 0.0:
            found.append(x)
    return found


def bracketed(f: Function, a: float, b: float, fa: float, fb: float) -> float:
    """The root between a and b, where f has different signs (Chandrupatla 1997, from memory)."""
    if fa == 0.0 or fb == 0.0:
        return a if fa == 0.0 else b
    least = 1e-2 * _EPSILON * abs(b - a)
    part = 0.5
    for _ in range(_MOST_STEPS):
        x = a + part * (b - a)
        fx = f(x)
        if (fx > 0.0) == (fa > 0.0):
            c, fc = a, fa
        else:
            c, fc, b, fb = b, fb, a, fa
        a, fa = x, fx
        best = a if abs(fa) < abs(fb) else b
        narrowest = (2 * _EPSILON * abs(best) + least) / abs(b - a)
        if fx == 0.0 or narrowest > 0.5:
            return best
        part = min(1.0 - narrowest, max(narrowest, _next_part(a, b, c, fa, fb, fc)))
    return best


def _next_part(a: float, b: float, c: float, fa: float, fb: float, fc: float) -> float:
    """Inverse quadratic interpolation where it can be trusted, else the middle."""
    if fc in (fa, fb):
        return 0.5
    xi, phi = (a - b) / (c - b), (fa - fb) / (fc - fb)
    if phi * phi < xi and (1.0 - phi) ** 2 < 1.0 - xi:
        return fa / (fb - fa) * fc / (fb - fc) + (c - a) / (b - a) * fa / (fc - fa) * fb / (fc - fb)
    return 0.5


def lowest(f: Function, a: float, b: float, enough: float = -math.inf) -> tuple[float, float]:
    """Where f is least between a and b, if it has one valley there, and its value; stops at a value below `enough`."""
    x, y = b - _GOLDEN * (b - a), a + _GOLDEN * (b - a)
    fx, fy = f(x), f(y)
    for _ in range(_GOLDEN_STEPS):
        if min(fx, fy) < enough:
            break
        if fx <= fy:
            b, y, fy = y, x, fx
            x = b - _GOLDEN * (b - a)
            fx = f(x)
        else:
            a, x, fx = x, y, fy
            y = a + _GOLDEN * (b - a)
            fy = f(y)
    return (x, fx) if fx <= fy else (y, fy)


def sampled_roots(f: Function, t0: float, t1: float, samples: int, touch: float) -> list[float]:
    """Roots of a continuous f from t0 to t1, found between samples; also where it touches nought within `touch`.

    Pairs of roots that lie between two samples are found where f dips between three. Raises Flat where f is within
    `touch` / 100 of nought over three samples on end.
    """
    times = [t0 + (t1 - t0) * k / samples for k in range(samples + 1)]
    values = [f(t) for t in times]
    if any(max(map(abs, triple)) <= touch / 100 for triple in zip(values, values[1:], values[2:], strict=False)):
        raise Flat
    found = [t for t, y in zip(times, values, strict=True) if y == 0.0]
    found += [t for t, y in ((t0, values[0]), (t1, values[-1])) if 0.0 < abs(y) <= touch]
    for (a, fa), (b, fb) in pairwise(zip(times, values, strict=True)):
        if fa * fb < 0.0:
            found.append(bracketed(f, a, b, fa, fb))
    for k in range(samples + 1):
        found += _dip(f, times[max(0, k - 1) : k + 2], values[max(0, k - 1) : k + 2], touch)
    return sorted(found)


def _dip(f: Function, times: Sequence[float], values: Sequence[float], touch: float) -> list[float]:
    """Both roots, or the touch, in a valley of |f| round the middle of three samples (or between two at an end)."""
    if min(values) <= 0.0 <= max(values):
        return []
    sign = math.copysign(1.0, values[0])
    sizes = [abs(y) for y in values]
    if sizes[1] > min(sizes) if len(sizes) == 3 else _climbs(f, times, sizes):
        return []
    t, y = lowest(lambda x: sign * f(x), times[0], times[-1], enough=0.0)
    if y < 0.0:
        ends = ((times[0], values[0]), (times[-1], values[-1]))
        return [bracketed(f, end, t, f_end, sign * y) for end, f_end in ends]
    return [t] if y <= touch else []


def _climbs(f: Function, times: Sequence[float], sizes: Sequence[float]) -> bool:
    """Whether |f| grows at once from the lesser of two samples toward the other."""
    near, far = times if sizes[0] <= sizes[1] else reversed(times)
    return abs(f(near + 1e-4 * (far - near))) >= min(sizes)
