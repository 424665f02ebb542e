"""The right-hand side: from a state and a hit to accelerations and forces.

Seven coordinates (chassis x, z, pitch; housing x, z, angle; front wheels along
their slide), all measured from ride height. Three unknown forces close the
system: the two link tensions and the slide's side load. They come from the
conditions that the links keep their length and the wheels stay on the slide,
differentiated twice (index-1 form of the constraint equations), with the drift
of the links' length fed back (Baumgarte, Computer Methods in Applied Mechanics
and Engineering 1 (1972) 1-16).
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from solver.kernel import layout as L
from solver.kernel.drivetrain import thrust
from solver.kernel.jit import inlined, lean
from solver.kernel.links import link, reactions, turn
from solver.kernel.rest import GRAVITY
from solver.kernel.springs import front_spring, rear_springs
from solver.kernel.wheels import front_wheels, rear_tyres, wheelie_bar

if TYPE_CHECKING:
    import numpy as np

SIXTY_FEET = 18.288  # m


@lean
def accelerate(p: np.ndarray, n: np.ndarray, hit: float, y: np.ndarray, dy: np.ndarray, out: np.ndarray) -> None:
    """The right-hand side.

    Parameters
    ----------
    p, n : float64 and int64 rows
        One lane as `layout` describes it, after `rest.settle`.
    hit : float
        What the drive table says now: horizontal force at the rear patch (N), wheel
        torque (N m), clutch capacity (N m) or throttle.
    y, dy : float64 (STATES,)
        State and its rate.
    out : float64 (OUTPUTS,)
        Forces, travels and gates at this state.
    """
    per_s, per_r, per_f = p[L.PER_SPRUNG_MASS], p[L.PER_REAR_MASS], p[L.PER_FRONT_MASS]
    per_i, per_h = p[L.PER_CHASSIS_INERTIA], p[L.PER_HOUSING_INERTIA]
    co, si = turn(y[L.PITCH])
    ch, sh = turn(y[L.HOUSING])
    w = y[7 + L.PITCH]

    # Everything that is not a constraint force.
    wx, wz, front_pull = front_wheels(p, y, co, si, out)
    slide_force = front_spring(p, n, y, out)
    rear_load = rear_tyres(p, y, out)
    fx, fz, moment, housing_moment = rear_springs(p, n, y, co, si, ch, sh, out)
    forward, torque = thrust(p, n, hit, y, rear_load, dy, out)
    housing_fx, housing_fz = forward - fx, rear_load - p[L.REAR_MASS] * GRAVITY - fz
    housing_moment += torque
    fx -= slide_force * si
    fz += slide_force * co - p[L.SPRUNG_MASS] * GRAVITY
    moment += slide_force * (wx * co + wz * si)
    if n[L.WHEELIE_ON] == L.ON_CHASSIS:
        force, turning = wheelie_bar(p, n, y, co, si, ch, sh, out)
        fz, moment = fz + force, moment + turning
    elif n[L.WHEELIE_ON] == L.ON_HOUSING:
        force, turning = wheelie_bar(p, n, y, co, si, ch, sh, out)
        housing_fz, housing_moment = housing_fz + force, housing_moment + turning
    free = fx * per_s, fz * per_s, moment * per_i
    housing_free = housing_fx * per_r, housing_fz * per_r, housing_moment * per_h

    # What the links and the slide add.
    low = link(p, y, co, si, ch, sh, L.LCX, L.LCZ, L.LHX, L.LHZ, L.LOWER_LENGTH)
    high = link(p, y, co, si, ch, sh, L.UCX, L.UCZ, L.UHX, L.UHZ, L.UPPER_LENGTH)
    arm = wx * si - wz * co
    wanted = w * w * (co * wx + si * wz) + 2.0 * w * y[7 + L.SLIDE] + front_pull * si * per_f
    lower, upper, side, out[L.O_LEVERAGE] = reactions(p, low, high, (co, si, arm, wanted), free, housing_free)
    out[L.O_LOWER], out[L.O_UPPER] = lower, upper
    out[L.O_DRIFT] = max(abs(low[5]), abs(high[5]))

    for i in range(L.COORDINATES):
        dy[i] = y[L.COORDINATES + i]
    pull_x, pull_z = lower * low[0] + upper * high[0], lower * low[1] + upper * high[1]
    dy[7 + L.X] = free[0] + (pull_x - side * co) * per_s
    dy[7 + L.Z] = free[1] + (pull_z - side * si) * per_s
    dy[7 + L.PITCH] = free[2] + (lower * low[2] + upper * high[2] - side * arm) * per_i
    dy[7 + L.HX] = housing_free[0] - pull_x * per_r
    dy[7 + L.HZ] = housing_free[1] - pull_z * per_r
    dy[7 + L.HOUSING] = housing_free[2] - (lower * low[3] + upper * high[3]) * per_h
    dy[7 + L.SLIDE] = (
        (front_pull * co - slide_force) * per_f
        + si * dy[7 + L.X]
        - co * dy[7 + L.Z]
        - (wx * co + wz * si) * dy[7 + L.PITCH]
        + w * w * (wz * co - wx * si)
    )
    report(p, y, forward, co, si, dy[7 + L.X], out)


@inlined
def report(p: np.ndarray, y: np.ndarray, thrust: float, co: float, si: float, acceleration: float, out: np.ndarray) -> None:
    """Fill the outputs that follow from the state alone."""
    out[L.O_PITCH], out[L.O_HOUSING] = y[L.PITCH], y[L.HOUSING]
    out[L.O_ACCELERATION], out[L.O_HIT] = acceleration, thrust
    out[L.O_SPEED] = y[7 + L.X]
    load = out[L.O_REAR_LOAD]
    out[L.O_GRIP] = thrust / load if load > 0.0 else (0.0 if thrust == 0.0 else math.inf)
    rx, rz = p[L.WHEELBASE] - p[L.SPRUNG_X], p[L.FRONT_RADIUS] - p[L.SPRUNG_Z]
    out[L.O_RIDE_FRONT] = y[L.Z] + si * rx + (co - 1.0) * rz
    rx, rz = -p[L.SPRUNG_X], p[L.REAR_RADIUS] - p[L.SPRUNG_Z]
    out[L.O_RIDE_REAR] = y[L.Z] + si * rx + (co - 1.0) * rz
    out[L.O_GATE + L.GATE_ROLLOUT] = out[L.O_DISTANCE] - p[L.ROLLOUT]
    out[L.O_GATE + L.GATE_SIXTY_FOOT] = out[L.O_DISTANCE] - p[L.ROLLOUT] - SIXTY_FEET
