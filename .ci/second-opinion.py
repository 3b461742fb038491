#!/usr/bin/python3
"""Computes the figures of rules/rf again, with scikit-rf.

TestSecondOpinion of rules/rf writes a file with kind, inputs, figure and our value
in each row:

    DRIPLOOP_SECOND_OPINION=FILE go test -count=1 -run TestSecondOpinion ./rules/rf
    /usr/bin/python3 .ci/second-opinion.py FILE

Here the same chains and lines are put together from scattering matrices and noise
correlation matrices and joined by the library, which has none of our formulas. Both
values are printed. The status is 1 where they differ and 2 where there is nothing to
compare. scikit-rf is the package python3-scikit-rf of Debian 12, version 0.15.
"""

import contextlib
import csv
import io
import itertools
import sys

import numpy as np

with contextlib.redirect_stdout(io.StringIO()):  # it says there that it draws no plots
    import skrf

SAME = 1e-6  # dB, or a plain number, by which single figures may differ
REACHED = 0.01  # dB by which a bound over all lengths may lie beyond what was found
BOUND = 1e-9  # dB that rounding may carry a loss past a bound
ANGLES = np.arange(0, 181, 5)  # electrical lengths of a stretch that are tried, degrees


def network(s, z0, points=1):
    """A network of the same scattering matrix at every point."""
    frequency = skrf.Frequency(1, 2, points, "ghz")
    s = np.asarray(s, dtype=complex)
    if s.ndim == 2:
        s = np.repeat(s[None, :, :], points, axis=0)
    return skrf.Network(frequency=frequency, s=s, z0=np.asarray(z0, dtype=complex))


def ratio(db):
    return 10 ** (db / 20)


def db(magnitude):
    return 20 * np.log10(np.abs(magnitude))


def stage(gain, nf):
    """A matched stage, with its noise at a matched source; one with gain passes one way only."""
    n = network([[0, 0 if gain > 0 else ratio(gain)], [ratio(gain), 0]], 50)
    n.set_noise_a(n.frequency, nfmin_db=nf, gamma_opt=0, rn=50)
    return n


def cascade(v):
    stages = [stage(gain, nf) for gain, nf in zip(v[::2], v[1::2])]
    total = stages[0]
    for s in stages[1:]:
        total = total**s
    return {
        "gain_db": db(total.s[0, 1, 0]),
        "nf_db": 10 * np.log10(total.nf(50.0)[0].real),
    }


def stretch(ohm, degrees):
    """A lossless line, of as many lengths as there are points."""
    turn = np.exp(-1j * np.deg2rad(np.asarray(degrees, dtype=float)))
    s = np.zeros((len(turn), 2, 2), dtype=complex)
    s[:, 0, 1] = s[:, 1, 0] = turn
    return network(s, ohm, len(turn))


def losses(ohms):
    """What a line of these impedances loses, over all lengths of what lies inside."""
    inside = len(ohms) - 2
    lengths = np.array(list(itertools.product(ANGLES, repeat=inside)), dtype=float)
    nothing = np.zeros(len(lengths))
    line = stretch(ohms[0], nothing)
    for i, ohm in enumerate(ohms[1:]):
        line = line ** stretch(ohm, lengths[:, i] if i < inside else nothing)
    return -db(line.s[:, 1, 0]), line.s[:, 0, 0]


def step(v):
    loss, reflected = losses(v)
    gamma = abs(reflected[0])
    return {
        "vswr": (1 + gamma) / (1 - gamma),
        "return_loss_db": -db(gamma),
        "least_db": loss[0],
        "nominal_db": loss[0],
        "greatest_db": loss[0],
    }


def load(v, line_db=0.0):
    """A resistor of that VSWR on 50 ohms, behind a matched attenuator."""
    resistor = network([[0]], 50 * v[0])
    ahead = network([[0, ratio(-line_db)], [ratio(-line_db), 0]], 50)
    gamma = abs((ahead**resistor).s[0, 0, 0])
    return {
        "reflected_share": gamma**2,
        "mismatch_loss_db": -10 * np.log10(1 - gamma**2),
        "return_loss_db": -db(gamma),
        "vswr": (1 + gamma) / (1 - gamma),
    }


def load_behind(v):
    return load(v, v[1])


def pad(v):
    """Two resistors between two impedances; no reflection may come back."""
    ohm1, ohm2, series, shunt = v
    high, low = max(ohm1, ohm2), min(ohm1, ohm2)
    chain = np.array([[1, series], [0, 1]]) @ np.array([[1, 0], [1 / shunt, 1]])
    both = network(skrf.a2s(chain[None, :, :].astype(complex), np.array([[high, low]], dtype=complex)), [[high, low]])
    if max(abs(both.s[0, 0, 0]), abs(both.s[0, 1, 1])) > SAME:
        return {"loss_db": float("nan")}
    return {"loss_db": -db(both.s[0, 1, 0])}


SINGLE = {"cascade": cascade, "step": step, "load": load, "load-behind": load_behind, "pad": pad}


def bounds(ohms, figure, ours):
    """The bound must hold for every length, and one of them must come close to it."""
    found, _ = losses(ohms)
    if figure == "least_db":
        theirs = found.min()
        return theirs, ours <= theirs + BOUND and theirs - ours <= REACHED
    theirs = found.max()
    return theirs, ours >= theirs - BOUND and ours - theirs <= REACHED


def compare(row):
    values = [float(x) for x in row["inputs"].split()]
    ours = float(row["ours"])
    if row["kind"] == "run":
        theirs, same = bounds(values, row["figure"], ours)
    else:
        theirs = SINGLE[row["kind"]](values)[row["figure"]]
        same = abs(theirs - ours) <= SAME
    print(f"{row['kind']:<12} {row['figure']:<17} {ours:>13.7f} {round(float(theirs), 7) + 0:>13.7f}  {'' if same else 'DIFFERS'}  {row['inputs']}")
    return bool(same)


def main(name):
    with open(name, newline="") as f:
        rows = list(csv.DictReader(f))
    missing = (set(SINGLE) | {"run"}) - {r["kind"] for r in rows}
    if missing:
        print("nothing to compare of:", ", ".join(sorted(missing)))
        return 2
    print(f"{'':<12} {'':<17} {'ours':>13} {'scikit-rf':>13}")
    differ = sum(not compare(r) for r in rows)
    print(f"second opinion of scikit-rf {skrf.__version__}: {len(rows)} figures compared, {differ} differ")
    return 1 if differ else 0


if __name__ == "__main__":
    if len(sys.argv) != 2:
        sys.exit("usage: second-opinion.py FILE")
    sys.exit(main(sys.argv[1]))
