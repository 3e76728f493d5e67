#!/usr/bin/env python3
"""One braking burn with its best ignition, aimed so that the orbit it leaves has the wanted periapsis, in scipy: for comparison
with `Capture::held`. Three cases: Mars with 400 N and with 4000 N, the Moon with 22 N (design notes, section 4).

The mass is an explicit function of time, so the state is position and velocity; the shut-off on the apoapsis is a terminal event
on 1/r_a = (1 - e)/p. For each ignition the aim is a root (secant, started from the aim of the last trial), and the cheapest ignition is
searched (bounded Brent). Relative accuracy 1e-10 a step, that of the engine.

Prints, case by case, the median time of the whole solution (three runs, or as many as the first argument says), the loss against
an impulse to the same orbit, and how many arcs were flown."""

import statistics
import sys
import time
from dataclasses import dataclass
from math import asinh, copysign, cosh, expm1, hypot, log1p, sinh, sqrt

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import minimize_scalar, root_scalar

G0 = 9.80665
ACCURACY = 1e-10
NOT_CAPTURED = 1e3  # km/s, dearer than anything


class NotCaptured(Exception):
    """The propellant went before the apoapsis came down."""


@dataclass
class Case:
    name: str
    gm: float  # km^3/s^2
    v_inf: float  # km/s
    periapsis: float  # km, of the orbit left
    apoapsis: float  # km
    mass: float  # kg at ignition
    thrust: float  # N
    isp: float  # s
    loss: float  # m/s, the published reference
    arcs: int = 0

    def __post_init__(self):
        self.exhaust = 1e-3 * self.isp * G0
        self.flow = self.thrust / (self.isp * G0)
        self.impulsive = self.impulse(self.periapsis)

    def impulse(self, q):
        """The impulsive dv at periapsis q, km/s."""
        gm, ra = self.gm, self.apoapsis
        return sqrt(self.v_inf**2 + 2 * gm / q) - sqrt(2 * gm * ra / (q * (q + ra)))

    def start(self, q, lead):
        """State on the hyperbola `lead` seconds before its periapsis."""
        a = self.gm / self.v_inf**2
        e = 1 + q / a
        n = sqrt(self.gm / a**3)
        mean = -n * lead
        f = copysign(min(asinh(abs(mean) / e), abs(mean) / (e - 1)), mean)
        for _ in range(60):
            step = (e * sinh(f) - f - mean) / (e * cosh(f) - 1)
            f -= step
            if abs(step) <= 1e-15 * max(abs(f), 1e-3):
                break
        rate = n / (e * cosh(f) - 1)
        b = a * sqrt(e * e - 1)
        return np.array([a * (e - cosh(f)), b * sinh(f), -a * sinh(f) * rate, b * cosh(f) * rate])

    def apsides(self, y):
        """1/r_p and 1/r_a of the osculating orbit."""
        momentum = y[0] * y[3] - y[1] * y[2]
        energy = 0.5 * (y[2] * y[2] + y[3] * y[3]) - self.gm / hypot(y[0], y[1])
        p = momentum * momentum / self.gm
        e = sqrt(max(1 + 2 * energy * p / self.gm, 0.0))
        return (1 + e) / p, (1 - e) / p

    def fly(self, q, lead):
        """Burn against the velocity until the apoapsis has come down: (dv spent in km/s, periapsis left in km)."""
        self.arcs += 1
        gm, flow, mass, push = self.gm, self.flow, self.mass, 1e-3 * self.thrust

        def motion(t, y):
            x, z, vx, vz = y.tolist()
            r2 = x * x + z * z
            pull = -gm / (r2 * sqrt(r2))
            brake = -push / ((mass - flow * t) * hypot(vx, vz))
            return vx, vz, pull * x + brake * vx, pull * z + brake * vz

        def captured(_, y):
            return self.apsides(y.tolist())[1] * self.apoapsis - 1

        captured.terminal, captured.direction = True, 1
        y0 = self.start(q, lead)
        r, v = hypot(y0[0], y0[1]), hypot(y0[2], y0[3])
        absolute = [ACCURACY * r, ACCURACY * r, ACCURACY * v, ACCURACY * v]
        longest = 0.95 * mass / flow
        end = solve_ivp(
            motion, (0, longest), y0, method="DOP853", events=captured, rtol=ACCURACY, atol=absolute
        )
        if end.status != 1:
            raise NotCaptured
        return -self.exhaust * log1p(-flow * end.t[-1] / mass), 1 / self.apsides(end.y[:, -1])[0]

    def held(self):
        """The cheapest ignition that leaves the wanted periapsis: (dv km/s, aim km, lead s)."""
        scale = -self.mass * expm1(-self.impulsive / self.exhaust) / self.flow
        aim, aims = self.periapsis, {}

        def cost(share):
            """The dv of this ignition, with the aim that leaves the periapsis: by secants from the aim of the last trial."""
            nonlocal aim
            flown = {}

            def miss(q):
                flown[q] = self.fly(q, share * scale)
                return flown[q][1] / self.periapsis - 1

            try:
                found = root_scalar(miss, x0=aim, x1=aim - self.periapsis * miss(aim), xtol=1e-7)
                if not found.converged:
                    return NOT_CAPTURED
                dv = (flown.get(found.root) or self.fly(found.root, share * scale))[0]
            except NotCaptured:
                return NOT_CAPTURED
            aim = aims[share] = found.root
            return dv

        # The cost has one valley near half the duration; its bottom is flat, so that 1e-5 in the lead is 1e-9 in the cost.
        best = minimize_scalar(cost, bounds=(0.4, 0.9), method="bounded", options={"xatol": 1e-5})
        return best.fun, aims[best.x], best.x * scale


def cases():
    mars = dict(gm=42828.3736, v_inf=2.65, periapsis=3696.19, apoapsis=38396.19, mass=2000.0, isp=317.0)
    return [
        Case("Mars 400 N", thrust=400.0, loss=163.20, **mars),
        Case("Mars 4000 N", thrust=4000.0, loss=2.970, **mars),
        Case("Moon 22 N", 4902.8, 0.85, 1837.4, 10000.0, 150.0, 22.0, 220.0, 24.127),
    ]


runs = int(sys.argv[1]) if len(sys.argv) > 1 else 3
for case in cases():
    times = []
    for _ in range(runs):
        case.arcs = 0
        start = time.perf_counter()
        dv, aim, lead = case.held()
        times.append(time.perf_counter() - start)
    print(
        f"{case.name:12} median {1e3 * statistics.median(times):8.1f} ms, {case.arcs} arcs, "
        f"loss {1e3 * (dv - case.impulsive):8.4f} m/s (reference {case.loss}), "
        f"aimed {aim - case.periapsis:7.2f} km high, ignition {lead:8.2f} s before periapsis"
    )
