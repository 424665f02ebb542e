"""Where link lines meet, and what that says about the force line from the patch."""

from __future__ import annotations

from typing import Any

import numpy as np


def meeting(a: Any, b: Any, c: Any, d: Any) -> tuple:
    """Where line `a b` meets line `c d`, kept as a direction when it is at infinity.

    Parameters
    ----------
    a, b, c, d : pair of float or pair of array
        Points (x, z), m; arrays must broadcast.

    Returns
    -------
    x, z, w : float or array
        Homogeneous coordinates: the point is (x/w, z/w); parallel lines have w = 0
        and meet in the direction (x, z).
    """
    l0, l1, l2 = a[1] - b[1], b[0] - a[0], a[0] * b[1] - b[0] * a[1]
    m0, m1, m2 = c[1] - d[1], d[0] - c[0], c[0] * d[1] - d[0] * c[1]
    return l1 * m2 - l2 * m1, l2 * m0 - l0 * m2, l0 * m1 - l1 * m0


def parallel(a: Any, b: Any, c: Any, d: Any, w: Any) -> Any:
    """Whether the lines' meeting point is farther off than can be told (1e-9 rad)."""
    size = np.hypot(b[0] - a[0], b[1] - a[1]) * np.hypot(d[0] - c[0], d[1] - c[1])
    return np.abs(w) <= 1e-9 * size


def turned(cosine: Any, sine: Any, point: tuple) -> tuple:
    """A body's point turned counter-clockwise in x-z by the angle of this cosine and sine."""
    return cosine * point[0] - sine * point[1], sine * point[0] + cosine * point[1]
