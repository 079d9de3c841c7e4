"""Aberration: the direction of light as seen from a moving frame.

Angles are those between the direction in which the light *comes in* (from the source) and the
direction of the frame's motion, 0 straight ahead, π straight behind. Passive: the primed angle is
what the moving frame sees. tan(θ′/2) = e^{−φ} tan(θ/2): a fast frame sees everything crowd ahead
(W. Rindler, *Relativity: Special, General, and Cosmological*, 2nd ed. (2006), §4.4; section from
memory).
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
    theta = np.asarray(angle, dtype=float)
    if not np.all((theta >= 0.0) & (theta <= np.pi)):
        raise ValueError("an angle from the direction of motion is between 0 and π")
    phi = np.asarray(rapidity, dtype=float)
    # sine and cosine of the half angle, each scaled, so that π itself stays π
    sine, cosine = np.sin(0.5 * theta), np.cos(0.5 * theta)
    return np.asarray(2.0 * np.arctan2(sine * np.exp(-0.5 * phi), cosine * np.exp(0.5 * phi)))


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
