"""The right-hand side: from a state and a hit to accelerations and forces.

Seven coordinates (chassis x, z, pitch; housing x, z, angle; front wheels along
their slide), all measured from ride height. Three unknown forces close the
system: the two link tensions and the slide's side load. They come from the
conditions that the links keep their length and the wheels stay on the slide,
differentiated twice (index-1 form of the constraint equations), with the drift
of the links' length fed back (Baumgarte, Computer Methods in Applied Mechanics
and Engineering 1 (1972) 1-16).
"""

import math

from solver.kernel import layout as L
from solver.kernel.curves import curve
from solver.kernel.drivetrain import thrust
from solver.kernel.jit import inlined, lean
from solver.kernel.rest import GRAVITY
from solver.kernel.tyre import push

SIXTY_FEET = 18.288  # m
FEEDBACK = 50.0  # rad/s, both roots of the drift's decay

# Coefficients of the sine's and the cosine's series.
S3, S5, S7, S9, S11, S13, S15, S17 = (
    (-1.0) ** k / math.factorial(2 * k + 1) for k in range(1, 9)
)
C2, C4, C6, C8, C10, C12, C14, C16, C18 = ((-1.0) ** k / math.factorial(2 * k) for k in range(1, 10))


@inlined
def turn(angle):
    """Cosine and sine, by their series to the last bit below 1.3 rad.

    A car beyond that has turned over and its run ends; the library's own
    functions, made for any angle, take a fifth of the whole right-hand side.
    """
    q = angle * angle
    sine = S13 + q * (S15 + q * S17)
    sine = S5 + q * (S7 + q * (S9 + q * (S11 + q * sine)))
    sine = 1.0 + q * (S3 + q * sine)
    cosine = C12 + q * (C14 + q * (C16 + q * C18))
    cosine = C4 + q * (C6 + q * (C8 + q * (C10 + q * cosine)))
    cosine = 1.0 + q * (C2 + q * cosine)
    return cosine, angle * sine


@inlined
def link(p, y, co, si, ch, sh, chassis_x, chassis_z, housing_x, housing_z, length):
    """One link: direction, moment arms, and the acceleration its motion asks for."""
    ax = co * (p[chassis_x] - p[L.SPRUNG_X]) - si * (p[chassis_z] - p[L.SPRUNG_Z])
    az = si * (p[chassis_x] - p[L.SPRUNG_X]) + co * (p[chassis_z] - p[L.SPRUNG_Z])
    bx = ch * p[housing_x] - sh * (p[housing_z] - p[L.REAR_RADIUS])
    bz = sh * p[housing_x] + ch * (p[housing_z] - p[L.REAR_RADIUS])
    ex = y[L.HX] + bx - p[L.SPRUNG_X] - y[L.X] - ax
    ez = y[L.HZ] + p[L.REAR_RADIUS] + bz - p[L.SPRUNG_Z] - y[L.Z] - az
    actual = math.sqrt(ex * ex + ez * ez)
    per_length = 1.0 / actual
    ux, uz = ex * per_length, ez * per_length
    w, v = y[7 + L.PITCH], y[7 + L.HOUSING]
    speed_x = y[7 + L.HX] - v * bz - y[7 + L.X] + w * az
    speed_z = y[7 + L.HZ] + v * bx - y[7 + L.Z] - w * ax
    along = ux * speed_x + uz * speed_z
    across = ux * speed_z - uz * speed_x
    stretch = actual - p[length]
    wanted = (
        -across * across * per_length
        - FEEDBACK * (2.0 * along + FEEDBACK * stretch)
        + v * v * (ux * bx + uz * bz)
        - w * w * (ux * ax + uz * az)
    )
    return ux, uz, ax * uz - az * ux, bx * uz - bz * ux, wanted, stretch


@inlined
def rear_line(p, y, co, si, ch, sh, at):
    """One rear spring line: direction from housing to chassis, arms, squeeze and its speed."""
    ax = co * (p[at + L.LINE_CX] - p[L.SPRUNG_X]) - si * (p[at + L.LINE_CZ] - p[L.SPRUNG_Z])
    az = si * (p[at + L.LINE_CX] - p[L.SPRUNG_X]) + co * (p[at + L.LINE_CZ] - p[L.SPRUNG_Z])
    bx = ch * p[at + L.LINE_HX] - sh * (p[at + L.LINE_HZ] - p[L.REAR_RADIUS])
    bz = sh * p[at + L.LINE_HX] + ch * (p[at + L.LINE_HZ] - p[L.REAR_RADIUS])
    ex = p[L.SPRUNG_X] + y[L.X] + ax - y[L.HX] - bx
    ez = p[L.SPRUNG_Z] + y[L.Z] + az - y[L.HZ] - p[L.REAR_RADIUS] - bz
    length = math.sqrt(ex * ex + ez * ez)
    per_length = 1.0 / length
    ux, uz = ex * per_length, ez * per_length
    speed_x = y[7 + L.X] - y[7 + L.PITCH] * az - y[7 + L.HX] + y[7 + L.HOUSING] * bz
    speed_z = y[7 + L.Z] + y[7 + L.PITCH] * ax - y[7 + L.HZ] - y[7 + L.HOUSING] * bx
    squeeze = p[at + L.LINE_LENGTH] - length
    return ux, uz, ax * uz - az * ux, bx * uz - bz * ux, squeeze, -ux * speed_x - uz * speed_z


@inlined
def rear_springs(p, n, y, co, si, ch, sh, out):
    """All rear springs, shocks and stops: their force and moments on chassis and housing."""
    fx, fz, chassis_moment, housing_moment = 0.0, 0.0, 0.0, 0.0
    coil, shock, stops = 0.0, 0.0, 0.0
    for i in range(n[L.N_LINES]):
        at = L.LINES + L.LINE_WIDTH * i
        ux, uz, arm, housing_arm, squeeze, speed = rear_line(p, y, co, si, ch, sh, at)
        spring = p[at + L.LINE_PRELOAD] + curve(p, n, L.LINE_SPRING + i, squeeze)
        damper = curve(p, n, L.LINE_DAMPER + i, speed)
        force = spring + damper
        coil += spring
        shock += damper
        if n[L.BUMP_LINE] == i:
            past = squeeze - p[L.REAR_BUMP_CLEARANCE]
            gate = curve(p, n, L.REAR_BUMP, past) + p[L.REAR_BUMP_DAMPING] * speed
            out[L.O_GATE + L.GATE_REAR_BUMP], out[L.O_REAR_BUMP_PAST] = gate, past
            force += max(0.0, gate)
            stops += max(0.0, gate)
        if n[L.DROOP_LINE] == i:
            past = -squeeze - p[L.REAR_DROOP_CLEARANCE]
            gate = curve(p, n, L.REAR_DROOP, past) - p[L.REAR_DROOP_DAMPING] * speed
            out[L.O_GATE + L.GATE_REAR_DROOP], out[L.O_REAR_DROOP_PAST] = gate, past
            force -= max(0.0, gate)
            stops -= max(0.0, gate)
        fx += force * ux
        fz += force * uz
        chassis_moment += force * arm
        housing_moment -= force * housing_arm
        if n[L.TRAVEL_LINE] == i:
            out[L.O_TRAVEL], out[L.O_TRAVEL_SPEED] = squeeze, speed
        if n[L.SHOCK_LINE] == i:
            out[L.O_SHOCK_TRAVEL], out[L.O_SHOCK_SPEED] = squeeze, speed
    out[L.O_REAR_COIL], out[L.O_REAR_SHOCK], out[L.O_REAR_STOP] = coil, shock, stops
    out[L.O_REAR_SPRING] = coil + shock
    return fx, fz, chassis_moment, housing_moment


@inlined
def front_spring(p, n, y, out):
    """Force along the front slide, spring and shock and stops, pushing the chassis up."""
    travel, speed = y[L.SLIDE], y[7 + L.SLIDE]
    spring = p[L.FRONT_SPRING_STATIC] + curve(p, n, L.FRONT_SPRING, travel)
    force = spring + curve(p, n, L.FRONT_DAMPER, speed)
    out[L.O_FRONT_SPRING] = force
    out[L.O_FRONT_TRAVEL], out[L.O_FRONT_SPEED] = travel, speed
    if n[L.FRONT_STOPS] == 0:
        return force
    past = travel - p[L.FRONT_BUMP_CLEARANCE]
    bump = curve(p, n, L.FRONT_BUMP, past) + p[L.FRONT_BUMP_DAMPING] * speed
    past = -travel - p[L.FRONT_DROOP_CLEARANCE]
    droop = curve(p, n, L.FRONT_DROOP, past) - p[L.FRONT_DROOP_DAMPING] * speed
    stops = max(0.0, bump) - max(0.0, droop)
    out[L.O_GATE + L.GATE_FRONT_BUMP], out[L.O_GATE + L.GATE_FRONT_DROOP] = bump, droop
    out[L.O_FRONT_STOP] = stops
    return force + stops


@inlined
def wheelie_bar(p, n, y, co, si, ch, sh, out):
    """Upward force of the wheelie bar's wheels and its moment about the body it is bolted to."""
    if n[L.WHEELIE_ON] == L.ON_CHASSIS:
        rx, rz = p[L.WHEELIE_X] - p[L.SPRUNG_X], p[L.WHEELIE_CLEARANCE] - p[L.SPRUNG_Z]
        arm = co * rx - si * rz
        height = p[L.SPRUNG_Z] + y[L.Z] + si * rx + co * rz
        speed = y[7 + L.Z] + y[7 + L.PITCH] * arm
    else:
        rx, rz = p[L.WHEELIE_X], p[L.WHEELIE_CLEARANCE] - p[L.REAR_RADIUS]
        arm = ch * rx - sh * rz
        height = p[L.REAR_RADIUS] + y[L.HZ] + sh * rx + ch * rz
        speed = y[7 + L.HZ] + y[7 + L.HOUSING] * arm
    gate = push(p[L.WHEELIE_RATE], p[L.WHEELIE_DAMPING], -height, -speed)
    out[L.O_GATE + L.GATE_WHEELIE] = gate
    force = max(0.0, gate)
    out[L.O_WHEELIE] = force
    return force, force * arm


@lean
def accelerate(p, n, hit, y, dy, out):
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
    w, slide_speed = y[7 + L.PITCH], y[7 + L.SLIDE]

    # Front wheels: where they are from the sprung CG, the tyre, the slide.
    rx, rz = p[L.WHEELBASE] - p[L.SPRUNG_X], p[L.FRONT_RADIUS] - p[L.SPRUNG_Z] + y[L.SLIDE]
    wx, wz = co * rx - si * rz, si * rx + co * rz
    rise = p[L.SPRUNG_Z] + y[L.Z] + wz - p[L.FRONT_RADIUS]
    rise_speed = y[7 + L.Z] + w * wx + co * slide_speed
    gate = push(
        p[L.FRONT_TYRE_RATE], p[L.FRONT_TYRE_DAMPING], p[L.FRONT_SQUASH] - rise, -rise_speed
    )
    out[L.O_GATE + L.GATE_FRONT_TYRE] = gate
    front_load = max(0.0, gate)
    out[L.O_FRONT_LOAD] = front_load
    out[L.O_FRONT_CLEARANCE] = max(0.0, rise - p[L.FRONT_SQUASH])
    front_pull = front_load - p[L.FRONT_MASS] * GRAVITY
    slide_force = front_spring(p, n, y, out)

    # Rear tyre.
    gate = push(
        p[L.REAR_TYRE_RATE], p[L.REAR_TYRE_DAMPING], p[L.REAR_SQUASH] - y[L.HZ], -y[7 + L.HZ]
    )
    out[L.O_GATE + L.GATE_REAR_TYRE] = gate
    rear_load = max(0.0, gate)
    out[L.O_REAR_LOAD] = rear_load

    # Everything that is not a constraint force.
    fx, fz, chassis_moment, housing_moment = rear_springs(p, n, y, co, si, ch, sh, out)
    forward, torque = thrust(p, n, hit, y, rear_load, dy, out)
    housing_fx, housing_fz = forward - fx, rear_load - p[L.REAR_MASS] * GRAVITY - fz
    housing_moment += torque
    fx -= slide_force * si
    fz += slide_force * co - p[L.SPRUNG_MASS] * GRAVITY
    chassis_moment += slide_force * (wx * co + wz * si)
    if n[L.WHEELIE_ON] != L.NO_WHEELIE:
        force, moment = wheelie_bar(p, n, y, co, si, ch, sh, out)
        if n[L.WHEELIE_ON] == L.ON_CHASSIS:
            fz += force
            chassis_moment += moment
        else:
            housing_fz += force
            housing_moment += moment

    # Link tensions and the slide's side load: S (lower, upper, side) = free motion - wanted.
    lx, lz, la, lb, wanted, drift = link(
        p, y, co, si, ch, sh, L.LCX, L.LCZ, L.LHX, L.LHZ, L.LOWER_LENGTH
    )
    ux, uz, ua, ub, upper_wanted, upper_drift = link(
        p, y, co, si, ch, sh, L.UCX, L.UCZ, L.UHX, L.UHZ, L.UPPER_LENGTH
    )
    js = wx * si - wz * co
    side_wanted = w * w * (co * wx + si * wz) + 2.0 * w * slide_speed + front_pull * si * per_f
    free = fx * per_s, fz * per_s, chassis_moment * per_i
    housing_free = housing_fx * per_r, housing_fz * per_r, housing_moment * per_h
    masses = per_s + per_r
    s11 = masses + la * la * per_i + lb * lb * per_h
    s22 = masses + ua * ua * per_i + ub * ub * per_h
    s12 = masses * (lx * ux + lz * uz) + la * ua * per_i + lb * ub * per_h
    s13 = (lx * co + lz * si) * per_s + la * js * per_i
    s23 = (ux * co + uz * si) * per_s + ua * js * per_i
    s33 = per_s + js * js * per_i + per_f
    r1 = lx * (housing_free[0] - free[0]) + lz * (housing_free[1] - free[1]) - wanted
    r1 += lb * housing_free[2] - la * free[2]
    r2 = ux * (housing_free[0] - free[0]) + uz * (housing_free[1] - free[1]) - upper_wanted
    r2 += ub * housing_free[2] - ua * free[2]
    r3 = co * free[0] + si * free[1] + js * free[2] - side_wanted
    # The side load first: s33 side = r3 + s13 lower + s23 upper.
    per_s33 = 1.0 / s33
    a11, a22 = s11 - s13 * s13 * per_s33, s22 - s23 * s23 * per_s33
    a12 = s12 - s13 * s23 * per_s33
    b1, b2 = r1 + s13 * r3 * per_s33, r2 + s23 * r3 * per_s33
    determinant = a11 * a22 - a12 * a12
    per_determinant = 1.0 / determinant
    lower = (b1 * a22 - b2 * a12) * per_determinant
    upper = (b2 * a11 - b1 * a12) * per_determinant
    side = (r3 + s13 * lower + s23 * upper) * per_s33
    out[L.O_LOWER], out[L.O_UPPER] = lower, upper
    out[L.O_DRIFT] = max(abs(drift), abs(upper_drift))
    out[L.O_LEVERAGE] = determinant / (a11 * a22)

    for i in range(L.COORDINATES):
        dy[i] = y[L.COORDINATES + i]
    dy[7 + L.X] = free[0] + (lower * lx + upper * ux - side * co) * per_s
    dy[7 + L.Z] = free[1] + (lower * lz + upper * uz - side * si) * per_s
    dy[7 + L.PITCH] = free[2] + (lower * la + upper * ua - side * js) * per_i
    dy[7 + L.HX] = housing_free[0] - (lower * lx + upper * ux) * per_r
    dy[7 + L.HZ] = housing_free[1] - (lower * lz + upper * uz) * per_r
    dy[7 + L.HOUSING] = housing_free[2] - (lower * lb + upper * ub) * per_h
    dy[7 + L.SLIDE] = (
        (front_pull * co - slide_force) * per_f
        + si * dy[7 + L.X]
        - co * dy[7 + L.Z]
        - (wx * co + wz * si) * dy[7 + L.PITCH]
        + w * w * (wz * co - wx * si)
    )
    report(p, y, forward, co, si, dy[7 + L.X], out)
    out[L.O_DISTANCE] = y[L.X] + wx - rx
    out[L.O_GATE + L.GATE_ROLLOUT] = out[L.O_DISTANCE] - p[L.ROLLOUT]
    out[L.O_GATE + L.GATE_SIXTY_FOOT] = out[L.O_DISTANCE] - p[L.ROLLOUT] - SIXTY_FEET


@inlined
def report(p, y, thrust, co, si, acceleration, out):
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
