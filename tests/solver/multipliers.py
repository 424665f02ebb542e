"""A second method of our own: constraint equations with Lagrange multipliers.

Written from the launch model, apart from the solver's kernel: three bodies in full
coordinates, constraints on the links' squared lengths and on the front wheels'
slide, the whole saddle-point system solved at each instant, SciPy's DOP853 at a
tight tolerance. Reads the car file's dict. Slow, and no part of the product.
"""

import math
from itertools import pairwise

import numpy as np
from scipy.integrate import solve_ivp

G = 9.80665
# q: chassis x, z, pitch; housing x, z, angle; front wheels x, z. Absolute positions.
C, H, F = 0, 3, 6


def interpolate(table, v):
    """Linear between points, on with the end slopes."""
    i = 1
    while i < len(table) - 1 and v > table[i][0]:
        i += 1
    (v0, f0), (v1, f1) = table[i - 1], table[i]
    return f0 + (f1 - f0) * (v - v0) / (v1 - v0)


def law(part, v):
    """Force of a spring, damper or stop body at a compression or speed."""
    if part is None:
        return 0.0
    return part["rate"] * v if "rate" in part else interpolate(part["table"], v)


class Model:
    """One car file as bodies, constraints and forces."""

    def __init__(self, data):
        self.data = data
        front, rear, L = data["front"], data["rear"], data["wheelbase"]
        self.mf, self.mr = front["unsprung_mass"], rear["unsprung_mass"]
        self.ms = data["mass"] - self.mf - self.mr
        rf, rr = front["tyre_radius"], rear["tyre_radius"]
        x, z = data["cg"]["x"], data["cg"]["z"]
        self.cg = np.array(
            [
                (data["mass"] * x - self.mf * L) / self.ms,
                (data["mass"] * z - self.mf * rf - self.mr * rr) / self.ms,
            ]
        )
        self.axle, self.wheel = np.array([0.0, rr]), np.array([L, rf])
        self.masses = np.array(
            [
                self.ms,
                self.ms,
                data["chassis"]["pitch_inertia"],
                self.mr,
                self.mr,
                rear["housing_inertia"],
                self.mf,
                self.mf,
            ]
        )
        self.q0 = np.array([*self.cg, 0.0, *self.axle, 0.0, *self.wheel])
        self.links = self._links(rear["linkage"])
        self.front_load = data["mass"] * G * x / L
        self.rear_load = data["mass"] * G - self.front_load
        self.rest = np.zeros(len(rear["springs"]))
        self._solve_rest()

    def _links(self, linkage):
        if linkage["kind"] == "ladder-bar":
            # One rigid bar: its chassis pin is a point of the housing too.
            pin = np.array(linkage["chassis"])
            return [(pin, pin, "x"), (pin, pin, "z")]
        ends = [(linkage[k]["chassis"], linkage[k]["housing"]) for k in ("lower", "upper")]
        return [(np.array(a), np.array(b), "length") for a, b in ends]

    def point(self, q, v, body, place):
        """World position, velocity and the moment arm of a body's point given at rest."""
        origin = {C: self.cg, H: self.axle}[body]
        co, si = math.cos(q[body + 2]), math.sin(q[body + 2])
        dx, dz = place[0] - origin[0], place[1] - origin[1]
        ax, az = co * dx - si * dz, si * dx + co * dz
        w = v[body + 2]
        return (q[body] + ax, q[body + 1] + az), (v[body] - w * az, v[body + 1] + w * ax), (ax, az)

    def jacobian(self, q):
        """Constraint values and their derivatives; rows: two of the links, one of the slide."""
        J, value, zero = np.zeros((3, 8)), np.zeros(3), np.zeros(8)
        for row, (at_chassis, at_housing, kind) in enumerate(self.links):
            (ax, az), _, (rx, rz) = self.point(q, zero, C, at_chassis)
            (bx, bz), _, (sx, sz) = self.point(q, zero, H, at_housing)
            dx, dz = bx - ax, bz - az
            if kind == "length":
                length2 = float(((at_housing - at_chassis) ** 2).sum())
                value[row] = 0.5 * (dx * dx + dz * dz - length2)
                ux, uz = dx, dz
            else:
                ux, uz = (1.0, 0.0) if kind == "x" else (0.0, 1.0)
                value[row] = dx if kind == "x" else dz
            J[row, C : C + 3] = -ux, -uz, ux * rz - uz * rx
            J[row, H : H + 3] = ux, uz, -ux * sz + uz * sx
        co, si = math.cos(q[2]), math.sin(q[2])
        dx, dz = q[F] - q[C], q[F + 1] - q[C + 1]
        value[2] = co * dx + si * dz - (self.wheel[0] - self.cg[0])
        J[2, C : C + 3] = -co, -si, -si * dx + co * dz
        J[2, F : F + 2] = co, si
        return value, J

    def forces(self, q, v, hit, report=None):
        """Generalised forces of everything but the constraints."""
        Q = np.zeros(8)
        Q[C + 1], Q[H + 1], Q[F + 1] = -self.ms * G, -self.mr * G, -self.mf * G
        for name, static, height, axle in (
            ("rear", self.rear_load, self.axle[1], H + 1),
            ("front", self.front_load, self.wheel[1], F + 1),
        ):
            tyre = self.data[name]["tyre"]
            squash = static / tyre["rate"] + height - q[axle]
            load = max(0.0, tyre["rate"] * squash - tyre["damping"] * v[axle])
            Q[axle] += load
            if report is not None:
                report[f"{name}_load"] = load
        Q[H] += hit
        Q[H + 2] += hit * q[H + 1]
        self._rear_lines(q, v, Q, report)
        self._front_slide(q, v, Q, report)
        self._wheelie_bar(q, v, Q)
        return Q

    def _along(self, q, v, Q, chassis, housing, force):
        """Add a force along a line between mounts; `force(squeeze, speed)`."""
        (ax, az), (avx, avz), (rx, rz) = self.point(q, v, C, chassis)
        (bx, bz), (bvx, bvz), (sx, sz) = self.point(q, v, H, housing)
        length = math.hypot(ax - bx, az - bz)
        ux, uz = (ax - bx) / length, (az - bz) / length
        squeeze = math.dist(chassis, housing) - length
        speed = -(ux * (avx - bvx) + uz * (avz - bvz))
        push = force(squeeze, speed)
        Q[C : C + 3] += push * ux, push * uz, push * (rx * uz - rz * ux)
        Q[H : H + 3] -= push * ux, push * uz, push * (sx * uz - sz * ux)
        return push

    def _rear_lines(self, q, v, Q, report):
        rear, total = self.data["rear"], 0.0
        for i, entry in enumerate(rear["springs"]):
            spring, damper = entry.get("spring"), entry.get("damper")

            def force(squeeze, speed, spring=spring, damper=damper, i=i):
                return self.rest[i] + law(spring, squeeze) - law(spring, 0.0) + law(damper, speed)

            total += self._along(q, v, Q, entry["chassis"], entry["housing"], force)
        if report is not None:
            report["rear_spring_force"] = total
        for name, sign in (("bump_stop", 1.0), ("droop_stop", -1.0)):
            stop = rear.get(name)
            if stop:
                mounts = stop if "chassis" in stop else rear["springs"][0]

                def force(squeeze, speed, stop=stop, sign=sign):
                    return sign * stop_push(stop, sign * squeeze, sign * speed)

                self._along(q, v, Q, mounts["chassis"], mounts["housing"], force)

    def _front_slide(self, q, v, Q, report):
        front, (co, si) = self.data["front"], (math.cos(q[2]), math.sin(q[2]))
        dx, dz = q[F] - q[C], q[F + 1] - q[C + 1]
        travel = -si * dx + co * dz - (self.wheel[1] - self.cg[1])
        speed = -si * (v[F] - v[C]) + co * (v[F + 1] - v[C + 1]) - v[2] * (co * dx + si * dz)
        push = self.front_load - self.mf * G + law(front["spring"], travel) - law(front["spring"], 0.0)
        push += law(front.get("damper"), speed)
        for name, sign in (("bump_stop", 1.0), ("droop_stop", -1.0)):
            if front.get(name):
                push += sign * stop_push(front[name], sign * travel, sign * speed)
        Q[F : F + 2] -= -si * push, co * push
        Q[C : C + 3] += -si * push, co * push, push * (co * dx + si * dz)
        if report is not None:
            report["front_travel"] = travel

    def _wheelie_bar(self, q, v, Q):
        bar = self.data.get("wheelie_bar")
        if bar:
            body = C if bar.get("mounted_on", "chassis") == "chassis" else H
            (_, z), (_, vz), (rx, _) = self.point(q, v, body, (bar["x"], bar["clearance"]))
            push = max(0.0, -bar["rate"] * z - bar["damping"] * vz)
            Q[body + 1] += push
            Q[body + 2] += push * rx

    def _solve_rest(self):
        """Preload and multipliers at ride height: forces and constraints balance, least squares."""
        still = np.zeros(8)
        base = self.forces(self.q0, still, 0.0)
        columns, springs = [], self.data["rear"]["springs"]
        rates = [law(s.get("spring"), 1e-7) - law(s.get("spring"), -1e-7) for s in springs]
        shares = np.array(rates) / sum(rates)
        self.rest = shares
        columns.append(self.forces(self.q0, still, 0.0) - base)
        _, J = self.jacobian(self.q0)
        A = np.column_stack([*columns, *J])
        found, *_ = np.linalg.lstsq(A, -base, rcond=None)
        assert np.abs(A @ found + base).max() < 1e-6 * self.rear_load
        self.rest = found[0] * shares

    def accelerate(self, q, v, hit):
        """Accelerations and multipliers."""
        return constrained(self.masses, lambda at: self.jacobian(at)[1], q, v, self.forces(q, v, hit))


def constrained(masses, jacobian, q, v, forces):
    """Accelerations and multipliers of bodies with diagonal masses under constraints J(q) v = 0.

    The equations of motion with Lagrange multipliers of any text on multibody dynamics; nothing in
    here knows of cars, so that published benchmarks can be put through it (test_published.py).
    """
    J = jacobian(q)
    eps = 1e-6
    # The constraints' second derivative along the motion, by a central difference.
    gamma = -((jacobian(q + eps * v) - jacobian(q - eps * v)) @ v) / (2.0 * eps)
    n, m = len(masses), len(J)
    A = np.zeros((n + m, n + m))
    A[range(n), range(n)] = masses
    A[:n, n:], A[n:, :n] = -J.T, J
    solution = np.linalg.solve(A, np.concatenate([forces, gamma]))
    return solution[:n], solution[n:]


def stop_push(stop, travel, speed):
    """Contact law of a stop: pushes only, not gated on its sign."""
    return max(0.0, law(stop, travel - stop["clearance"]) + stop.get("damping", 0.0) * speed)


def hit_at(table, t):
    """The hit table: nil before, linear between, held after."""
    if t < table[0][0]:
        return 0.0
    return float(np.interp(t, [row[0] for row in table], [row[1] for row in table]))


def solve(data, times, tolerance=1e-9, longest=2.5e-3):
    """Channels of a launch at `times` by the names of the car file's histories."""
    model = Model(data)
    table = data["hit"]["table"]
    knots = sorted({0.0, times[-1], *(t for t, _ in table if 0.0 < t < times[-1])})
    y, rows = np.concatenate([model.q0, np.zeros(8)]), []

    def rate(t, y):
        a, _ = model.accelerate(y[:8], y[8:], hit_at(table, t))
        return np.concatenate([y[8:], a])

    for start, end in pairwise(knots):
        last = end == knots[-1]
        inside = times[(times >= start - 1e-12) & ((times < end - 1e-12) | last)].clip(start, end)
        run = solve_ivp(
            rate,
            (start, end),
            y,
            method="DOP853",
            rtol=tolerance,
            atol=tolerance,
            max_step=longest,
            t_eval=inside if last else np.append(inside, end),
        )
        assert run.success, run.message
        rows += [run.y[:, i] for i in range(len(inside))]
        y = run.y[:, -1]
    return channels(model, table, times, rows)


def channels(model, table, times, rows):
    """The car file's named channels from states."""
    names = "pitch cg_x cg_z housing_angle rear_spring_force rear_load front_load front_travel".split()
    out = {name: [] for name in [*names, "lower_link_force", "upper_link_force"]}
    for t, y in zip(times, rows, strict=True):
        q, v, report = y[:8], y[8:], {}
        hit = hit_at(table, t)
        _, multipliers = model.accelerate(q, v, hit)
        model.forces(q, v, hit, report)
        report |= {
            "pitch": q[2],
            "cg_x": q[0] - model.cg[0],
            "cg_z": q[1] - model.cg[1],
            "housing_angle": q[5],
        }
        for multiplier, side, (a, b, _) in zip(multipliers, ("lower", "upper"), model.links, strict=False):
            plan = model.data["rear"]["linkage"].get(side, {}).get("plan_angle", 0.0)
            # The multiplier pushes the ends apart: tension is its opposite.
            report[f"{side}_link_force"] = -multiplier * math.dist(a, b) / math.cos(plan)
        for name, values in out.items():
            values.append(report[name])
    return {name: np.array(values) for name, values in out.items()}
