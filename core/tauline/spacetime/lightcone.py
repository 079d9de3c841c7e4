"""Light-cone coordinates: u = t − x, v = t + x, with c = 1.

Events are arrays whose first axis has the rows (u, v), (u, v, y) or (u, v, y, z) for motion in
1, 2 or 3 dimensions of space; the other axes are free. A boost along x multiplies u and v, so
that neither loses digits, however fast (W. Rindler, *Relativity: Special, General, and
Cosmological*, 2nd ed. (2006), §2.8 and ex. 2.13, section from memory).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]


def to_lightcone(t: ArrayLike, x: ArrayLike, *transverse: ArrayLike) -> Array:
    """Return rows (u, v, …) of events at time t and place x, and y, z where given.

    All in one unit (lengths as light-times) and broadcast against one another.

    >>> to_lightcone(5.0, 3.0).tolist()
    [2.0, 8.0]
    """
    if len(transverse) > 2:
        raise ValueError("space has at most three dimensions")
    rows = [np.subtract(t, x), np.add(t, x), *transverse]
    return np.stack(np.broadcast_arrays(*(np.asarray(row, dtype=float) for row in rows)))


def from_lightcone(coordinates: ArrayLike) -> Array:
    """Return rows (t, x, …) of events given by their rows (u, v, …).

    >>> from_lightcone([2.0, 8.0]).tolist()
    [5.0, 3.0]
    """
    rows = as_rows(coordinates)
    result = rows.copy()
    result[0] = 0.5 * (rows[0] + rows[1])
    result[1] = 0.5 * (rows[1] - rows[0])
    return result


def as_rows(coordinates: ArrayLike) -> Array:
    """Return the argument as a float array; ValueError unless it has 2, 3 or 4 rows."""
    rows = np.asarray(coordinates, dtype=float)
    if rows.ndim == 0 or rows.shape[0] not in (2, 3, 4):
        raise ValueError(f"expected 2, 3 or 4 rows (u, v, y, z), got shape {rows.shape}")
    return rows
