"""Worldlines: one kind per file behind the protocol :class:`Worldline`."""

from tauline.worldlines.acceleration import ConstantAcceleration
from tauline.worldlines.chain import Chain, Leg, chain, legs_of
from tauline.worldlines.coast import Coast
from tauline.worldlines.companion import Companion, displaced, rigid_companion
from tauline.worldlines.protocol import Side, Worldline

__all__ = [
    "Chain",
    "Coast",
    "Companion",
    "ConstantAcceleration",
    "Leg",
    "Side",
    "Worldline",
    "chain",
    "displaced",
    "legs_of",
    "rigid_companion",
]
