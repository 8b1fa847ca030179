"""Operating points of synchronous motors from the complex circuit, apart from the product's own code.

Reads a JSON list of {motor, at: {shaftKw, kvar, voltagePu}} from standard input and writes a list of figures. The circuit is solved in
phasors per phase, in per unit of the machine's rating: terminal voltage on the real axis, I = conj(S / V), the q axis along
V - (Ra + j Xq) I (Blondel's two reactions; IEEE Std 115 for saturation behind the leakage reactance). Losses are found by substitution.
Needs numpy alone.
"""

import json
import sys

import numpy as np

ANGLES = np.linspace(0.0, np.pi, 2001)


def circuit(m, v, p, q):
    """Emf, load angle and current at terminal power p + jq."""
    current = np.conj((p + 1j * q) / v)
    along_q = v - (m["raPu"] + 1j * m["xqPu"]) * current
    q_axis = along_q / abs(along_q)
    in_q = (current * np.conj(q_axis)).real * q_axis
    in_d = current - in_q
    emf = v - m["raPu"] * current - 1j * m["xdPu"] * in_d - 1j * m["xqPu"] * in_q
    return (emf * np.conj(q_axis)).real, -np.angle(q_axis), current


def curve_current(curve, volts):
    """Field amperes of an open-circuit curve: chords, the last one prolonged, the first from the origin."""
    amps = np.concatenate([[0.0], [point["fieldCurrentA"] for point in curve if point["fieldCurrentA"] > 0]])
    pu = np.concatenate([[0.0], [point["voltagePu"] for point in curve if point["fieldCurrentA"] > 0]])
    k = min(max(int(np.searchsorted(pu, volts)), 1), len(pu) - 1)
    return amps[k - 1] + (volts - pu[k - 1]) * (amps[k] - amps[k - 1]) / (pu[k] - pu[k - 1])


def field_current(m, v, emf, current):
    curve = m.get("openCircuitCurve")
    if not curve:
        rated = 1.0
        sine = np.sqrt(max(0.0, 1 - m["ratedPowerFactor"] ** 2))
        calibration, _, _ = circuit(m, rated, m["ratedPowerFactor"], -sine)
        return m["ratedFieldCurrentA"] * emf / calibration
    slope = max(point["voltagePu"] / point["fieldCurrentA"] for point in curve if point["fieldCurrentA"] > 0)
    behind = abs(v - (m["raPu"] + 1j * m["xlPu"]) * current)
    return emf / slope + curve_current(curve, behind) - behind / slope


def greatest_developed(m, v, emf):
    """Greatest developed power over the load angle: a grid, then the grid again around its best point."""
    def developed(angle):
        # In the rotor's frame, real axis along the emf: V = E + Ra I + j Xd Id + j Xq Iq, solved for I.
        real, imag = v * np.cos(angle) - emf, v * np.sin(angle)
        ra, xd, xq = m["raPu"], m["xdPu"], m["xqPu"]
        det = ra * ra + xd * xq
        iq = (ra * real + xd * imag) / det
        i_d = (ra * imag - xq * real) / det
        volts = v * np.exp(1j * angle)
        current = iq + 1j * i_d
        return (volts * np.conj(current)).real - ra * abs(current) ** 2

    lo, hi = 0.0, np.pi
    for _ in range(6):
        grid = lo + (hi - lo) * ANGLES / np.pi
        best = int(np.argmax(developed(grid)))
        lo, hi = grid[max(0, best - 1)], grid[min(len(grid) - 1, best + 1)]
    return float(developed(np.array([(lo + hi) / 2]))[0])


def point(case):
    m, at = case["motor"], case["at"]
    v = at["voltagePu"]
    base = m["ratedOutputKw"] / (m["ratedEfficiency"] * m["ratedPowerFactor"])
    split = case["lossSplitKw"]
    shaft, q = at["shaftKw"] / base, at["kvar"] / base
    beside = m.get("exciterSupply") == "bus"
    p = shaft
    for _ in range(500):
        emf, angle, current = circuit(m, v, p, q)
        amps = field_current(m, v, emf, current)
        field = amps**2 * m["fieldResistanceOhm"] / 1000 / base
        exciter = field * (1 / m["exciterEfficiency"] - 1)
        losses = {
            "armature": m["raPu"] * abs(current) ** 2,
            "field": field,
            "exciter": exciter,
            "stray": split["strayKw"] / base * abs(current) ** 2,
            "core": split["coreKw"] / base * v**2,
            "frictionWindage": split["frictionWindageKw"] / base,
        }
        total = shaft + sum(losses.values())
        before, p = p, total - (field + exciter if beside else 0)
        if abs(p - before) < 1e-15:
            break
    developed = p - m["raPu"] * abs(current) ** 2
    return {
        "inputKw": total * base,
        "lineCurrentA": abs(current) * base * 1000 / (np.sqrt(3) * m["ratedVoltageV"]),
        "powerFactor": total / np.hypot(total, q),
        "emfPu": emf,
        "loadAngleDeg": np.degrees(angle),
        "fieldCurrentA": amps,
        "pullOutRatio": greatest_developed(m, v, emf) / developed,
        "lossesKw": {name: share * base for name, share in losses.items()},
    }


json.dump([point(case) for case in json.load(sys.stdin)], sys.stdout)
