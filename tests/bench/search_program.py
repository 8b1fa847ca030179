"""The plan simulation and search of the bench, as a plain numpy and scipy script would do them.

Argument: a JSON file naming the year's file (kWh, lagging and leading kvarh of quarters of an hour as little-endian doubles), the motors
with their shaft loads, standing fields and bounds, the span of each interval, and candidates to price. Prints totals of the candidates, the
median milliseconds of one, and what a general-purpose minimiser (differential evolution, then a polish without slopes) found.
"""

import json
import sys
import time

import numpy as np
from numpy_program import price
from scipy.optimize import differential_evolution, minimize


class Motor:
    """A motor without saturation, its exciter on the shaft: per unit of its own rating, currents in phasors."""

    def __init__(self, data, shaft):
        self.m = data
        self.loads, self.index = np.unique(shaft, return_inverse=True)
        self.base = data["ratedOutputKw"] / (data["ratedEfficiency"] * data["ratedPowerFactor"])
        p, q = data["ratedPowerFactor"], -np.sqrt(1 - data["ratedPowerFactor"] ** 2)
        current = complex(p, -q)
        axis = 1 - (data["raPu"] + 1j * data["xqPu"]) * current
        axis /= abs(axis)
        in_q = (current * np.conj(axis)).real * axis
        emf = 1 - data["raPu"] * current - 1j * data["xdPu"] * (current - in_q) - 1j * data["xqPu"] * in_q
        self.rated_emf = (emf * np.conj(axis)).real
        split = data["lossSplitKw"]
        self.constant = (split["coreKw"] + split["frictionWindageKw"]) / self.base
        self.stray = split["strayKw"] / self.base
        self.standing = self.taken(data["standingFieldA"])

    def taken(self, amps):
        """Input and reactive power at every distinct load, by Newton's steps over the load angle. [kW, kvar]"""
        m = self.m
        emf = self.rated_emf * amps / m["ratedFieldCurrentA"]
        ra, xd, xq = m["raPu"], m["xdPu"], m["xqPu"]
        det = ra * ra + xd * xq
        excitation = amps**2 * m["fieldResistanceOhm"] / 1000 / self.base / m["exciterEfficiency"]
        shaft = self.loads / self.base

        def at(angle):
            real, imag = np.cos(angle) - emf, np.sin(angle)
            iq, i_d = (ra * real + xd * imag) / det, (ra * imag - xq * real) / det
            power = np.exp(1j * angle) * (iq - 1j * i_d)
            losses = (ra + self.stray) * (iq**2 + i_d**2) + self.constant + excitation
            return power, power.real - shaft - losses

        angle = np.full(len(shaft), 0.3)
        for _ in range(30):
            _, gap = at(angle)
            _, beyond = at(angle + 1e-6)
            step = np.clip(gap / ((beyond - gap) / 1e-6), -0.3, 0.3)
            angle = angle - step
            if np.max(np.abs(step)) < 1e-13:
                break
        power, _ = at(angle)
        running = self.loads > 0
        return np.where(running, power.real, 0) * self.base, np.where(running, power.imag, 0) * self.base

    def change(self, amps):
        kw, kvar = self.taken(amps)
        return (kw - self.standing[0])[self.index], (kvar - self.standing[1])[self.index]


def shifted(lagging, leading, e):
    """Registers after e kvarh more are absorbed."""
    both = lagging + leading
    share = np.where(both > 0, lagging / np.where(both > 0, both, 1), (e >= 0) * 1.0)
    a, b = lagging + share * e, leading - (1 - share) * e
    return np.maximum(a, 0) + np.maximum(-b, 0), np.maximum(b, 0) + np.maximum(-a, 0)


def main():
    task = json.load(open(sys.argv[1]))
    kwh, lagging, leading = np.fromfile(task["year"], dtype="<f8").reshape(3, -1)
    spans = np.fromfile(task["spans"], dtype="u1")
    motors = [Motor(m, np.fromfile(m["shaft"], dtype="<f8")) for m in task["motors"]]
    count = int(spans.max()) + 1

    def totals(fields):
        kw = np.zeros(len(kwh))
        kvar = np.zeros(len(kwh))
        for m, motor in enumerate(motors):
            for span in range(count):
                more_kw, more_kvar = motor.change(fields[m * count + span])
                inside = spans == span
                kw += np.where(inside, more_kw, 0)
                kvar += np.where(inside, more_kvar, 0)
        lag, lead = shifted(lagging, leading, kvar / 4)
        return price(kwh + kw / 4, lag, lead, task["startMs"])

    priced, times = [], []
    for candidate in task["candidates"]:
        begun = time.perf_counter()
        priced.append(totals(candidate))
        times.append((time.perf_counter() - begun) * 1000)

    cost = lambda fields: float(np.sum(totals(fields)))
    bounds = [tuple(m["bounds"]) for m in task["motors"] for _ in range(count)]
    begun = time.perf_counter()
    wide = differential_evolution(cost, bounds, maxiter=task["rounds"], popsize=6, seed=1, polish=False, tol=1e-8)
    found = minimize(cost, wide.x, method="Nelder-Mead", bounds=bounds, options={"maxfev": 400, "xatol": 0.05, "fatol": 0.01})
    seconds = time.perf_counter() - begun
    answer = {
        "totals": priced,
        "ms": sorted(times)[len(times) // 2],
        "fields": [float(x) for x in found.x],
        "cost": cost(found.x),
        "evaluations": int(wide.nfev + found.nfev),
        "seconds": seconds,
    }
    print(json.dumps(answer))


if __name__ == "__main__":
    main()
