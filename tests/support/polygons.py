"""Points and convex polygons."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray


def inside(polygon: NDArray[np.float64], point: Sequence[float], slack: float) -> bool:
    """Whether a point lies in a convex polygon, counterclockwise, or at most `slack` outside of a side."""
    if not len(polygon):
        return False
    side = np.roll(polygon, -1, axis=0) - polygon
    to_point = np.array(point) - polygon
    cross = side[:, 0] * to_point[:, 1] - side[:, 1] * to_point[:, 0]
    return bool((cross >= -slack * np.hypot(*side.T)).all())
