"""Tyres: a contact that pushes only, and what it holds along the track."""

from __future__ import annotations

from solver.kernel.jit import inlined


@inlined
def push(rate: float, damping: float, squash: float, speed: float) -> float:
    """A contact before it is cut at nil: not gated on `squash`, so that it never jumps."""
    return rate * squash + damping * speed


@inlined
def fiala(slip: float, load: float, stiffness: float, grip: float, sliding_grip: float) -> float:
    """Longitudinal force of the Fiala tyre, N.

    Grip falls from `grip` at no slip to `sliding_grip` at full slip:
    ``U = grip - (grip - sliding_grip) |k|``. Below the critical slip
    ``U N/(2 C)`` the force is ``C k``, above it ``U N - (U N)^2/(4 |k| C)``
    (Fiala, VDI-Zeitschrift 96 (1954); this form as a general open multibody
    engine's tyre model states it).
    """
    size = min(abs(slip), 1.0)
    most = (grip - (grip - sliding_grip) * size) * load
    if size <= 0.5 * most / stiffness:
        force = stiffness * size
    else:
        force = most - most * most / (4.0 * size * stiffness)
    return force if slip >= 0.0 else -force
