"""Aberration: the direction of light as seen from a moving frame.

Angles are those between the direction in which the light *comes in* (from the source) and the
direction of the frame's motion, 0 straight ahead, π straight behind. Passive: the primed angle is
what the moving frame sees. tan(θ′/2) = e^{−φ} tan(θ/2): a fast frame sees everything crowd ahead
(W. Rindler, *Relativity: Special, General, and Cosmological*, 2nd ed. (2006), §4.4; section from
memory).

The direction in which the light *goes* is the opposite one, π − θ, and obeys the same law with
e^{+φ}: hand −φ to :func:`aberrated_angle`, or a vector turned about to
:func:`aberrated_direction` and the result turned back.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from tauline.spacetime.lightcone import Array


def aberrated_angle(angle: ArrayLike, rapidity: ArrayLike) -> Array:
    """Angle, in radians from 0 to π, at which a frame of this rapidity sees a source.

    Written with the half angle, so that no digits are lost straight ahead, straight behind, or
    near the speed of light. ValueError unless 0 ≤ angle ≤ π.
    """
    theta = _angle(angle)
    phi = np.asarray(rapidity, dtype=float)
    # sine and cosine of the half angle, each scaled, so that π itself stays π
    sine, cosine = np.sin(0.5 * theta), np.cos(0.5 * theta)
    return np.asarray(2.0 * np.arctan2(sine * np.exp(-0.5 * phi), cosine * np.exp(0.5 * phi)))


def aberration_shift(angle: ArrayLike, rapidity: ArrayLike) -> Array:
    """Angle θ − θ′, in radians, by which a source is seen shifted towards the motion.

    Right to the last digits for slow frames, where the difference of the two angles is not.
    About β sin θ there. From tan(θ′/2) and tan(θ/2) as above. ValueError unless 0 ≤ angle ≤ π.
    """
    theta = _angle(angle)
    phi = np.asarray(rapidity, dtype=float)
    sine, cosine = np.sin(0.5 * theta), np.cos(0.5 * theta)
    shrink = np.exp(-phi)
    return np.asarray(
        2.0 * np.arctan2(-np.expm1(-phi) * sine * cosine, cosine * cosine + shrink * sine * sine)
    )


def doppler_factor_at(angle: ArrayLike, rapidity: ArrayLike) -> Array:
    """Doppler factor γ(1 + β cos θ) of light from a source at rest.

    As received in a frame of this rapidity, with the angle θ at which the source stands in its
    own rest frame, as above (W. Rindler, ibid., §4.3; section from memory). Written as
    cos²(θ/2) e^{φ} + sin²(θ/2) e^{−φ}.
    """
    theta = np.asarray(angle, dtype=float)
    phi = np.asarray(rapidity, dtype=float)
    ahead, behind = np.cos(0.5 * theta) ** 2, np.sin(0.5 * theta) ** 2
    return np.asarray(ahead * np.exp(phi) + behind * np.exp(-phi))


def doppler_factor_seen_at(angle: ArrayLike, rapidity: ArrayLike) -> Array:
    """Doppler factor 1/(γ(1 − β cos θ′)) for the angle at which the source is *seen*.

    The same D as :func:`doppler_factor_at`, with the angle θ′ of the receiving frame instead of
    the source's. Read in the receiver's frame, the source moves with this rapidity, and θ′ is also
    the angle between its velocity and the light's way to the receiver: 0 for a source coming
    straight on, π for one going straight away (W. Rindler, ibid., §4.3; section from memory).
    Written as 1/(sin²(θ′/2) e^{φ} + cos²(θ′/2) e^{−φ}).
    """
    theta = np.asarray(angle, dtype=float)
    phi = np.asarray(rapidity, dtype=float)
    behind, ahead = np.sin(0.5 * theta) ** 2, np.cos(0.5 * theta) ** 2
    return np.asarray(1.0 / (behind * np.exp(phi) + ahead * np.exp(-phi)))


def aberrated_direction(direction: ArrayLike, rapidity: ArrayLike, motion: ArrayLike) -> Array:
    """Unit vectors towards sources as seen from a frame moving with this rapidity.

    ``direction`` ``(n, *N)``, n = 2 or 3, points to each source in the old frame; ``motion``
    ``(n,)`` is the direction in which the new frame moves, its axes not turned against the old
    ones; the rapidity broadcasts against ``N``. Sources straight ahead and straight behind stay
    there. A vector holds how far off the line behind a source is, which an angle rounded to near
    π does not: prefer this form for fast frames. ValueError unless all are unit vectors within
    1e-12. The law is that of the angles, above, the plane through the motion unchanged.
    """
    old = np.asarray(direction, dtype=float)
    unit = np.asarray(motion, dtype=float)
    if unit.shape not in ((2,), (3,)) or old.shape[:1] != unit.shape:
        raise ValueError("directions have 2 or 3 components, and the motion as many")
    if not (abs(float(unit @ unit) - 1.0) <= 1e-12 and _are_units(old)):
        raise ValueError("directions must be unit vectors")
    phi = np.asarray(rapidity, dtype=float)
    shape = np.broadcast_shapes(old.shape[1:], phi.shape)
    along = np.tensordot(unit, old, axes=1)
    axis = unit.reshape((-1, *(1,) * (old.ndim - 1)))
    across = old - along * axis
    # what rounding left along the motion would stand out behind a fast frame
    across = across - np.tensordot(unit, across, axes=1) * axis
    size = np.sqrt(np.sum(across * across, axis=0))
    # sine and cosine of the half angle up to one factor, from the larger of 1 ± cos θ
    front = along >= 0.0
    sine = np.where(front, size, 1.0 - along) * np.exp(-0.5 * phi)
    cosine = np.where(front, 1.0 + along, size) * np.exp(0.5 * phi)
    square = sine * sine + cosine * cosine
    sideways = np.divide(across, size, out=np.zeros_like(across), where=size > 0.0)
    return np.asarray(
        np.broadcast_to((cosine - sine) * (cosine + sine) / square, shape)
        * unit.reshape((-1, *(1,) * len(shape)))
        + 2.0 * sine * cosine / square * sideways.reshape((len(unit), *_padded(old, shape)))
    )


def _angle(angle: ArrayLike) -> Array:
    theta = np.asarray(angle, dtype=float)
    if not np.all((theta >= 0.0) & (theta <= np.pi)):
        raise ValueError("an angle from the direction of motion is between 0 and π")
    return theta


def _are_units(vectors: Array) -> bool:
    return bool(np.all(np.abs(np.sum(vectors * vectors, axis=0) - 1.0) <= 1e-12))


def _padded(vectors: Array, shape: tuple[int, ...]) -> tuple[int, ...]:
    """Return the shape of N with ones in front, so that the rows stay the first axis."""
    return (1,) * (len(shape) - (vectors.ndim - 1)) + vectors.shape[1:]
