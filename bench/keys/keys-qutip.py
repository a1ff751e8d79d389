"""The workload of `npm run bench:keys` in QuTiP: reads keys as JSON lines, prints one value a line.

Each kind is written as someone who knows QuTiP would write it, in a basis just large enough for ten digits.
"""
import json
import sys

import numpy as np
import qutip as qt

ONE, TWO = 60, 14


def coherent(d, alpha):
    return qt.coherent(d, alpha, method="analytic")


def lossy(rho, eta):
    d = rho.shape[0]
    a = qt.destroy(d)
    return qt.mesolve(0 * a, rho, [0, -np.log(eta)], [a], [], options=OPTIONS).states[-1]


OPTIONS = qt.Options(atol=1e-12, rtol=1e-10, nsteps=100000)


def amplified(rho, gain):
    d = rho.shape[0]
    return qt.mesolve(0 * rho, rho, [0, np.log(gain)], [qt.create(d)], [], options=OPTIONS).states[-1]


def splitter(d, transmittance):
    a, b = qt.tensor(qt.destroy(d), qt.qeye(d)), qt.tensor(qt.qeye(d), qt.destroy(d))
    return (1j * np.arccos(np.sqrt(transmittance)) * (a.dag() * b + a * b.dag())).expm()


def p(rho, n):
    return float(np.real(rho[n, n])) if rho.isoper else abs(rho.full()[n, 0]) ** 2


def cat(d, alpha, theta=0.0):
    return qt.ket2dm((coherent(d, alpha) + np.exp(1j * theta) * coherent(d, -alpha)).unit())


def twin(d, r):
    return sum(np.tanh(r) ** n / np.cosh(r) * qt.tensor(qt.basis(d, n), qt.basis(d, n)) for n in range(d)).unit()


def heralded(d, r, eta, n):
    rho = qt.ket2dm(twin(d, r))
    a = qt.tensor(qt.destroy(d), qt.qeye(d))
    rho = qt.mesolve(0 * a, rho, [0, -np.log(eta)], [a], [], options=OPTIONS).states[-1]
    found = qt.tensor(qt.fock_dm(d, 1), qt.qeye(d))
    left = (found * rho * found).ptrace(1)
    return p(left / left.tr(), n)


def subtracted(d, r, transmittance):
    psi = splitter(d, transmittance) * qt.tensor(qt.squeeze(d, r) * qt.basis(d, 0), qt.basis(d, 0))
    found = qt.tensor(qt.qeye(d), qt.fock_dm(d, 1))
    left = (found * psi).unit().ptrace(0)
    n = qt.num(d)
    return qt.expect(n * (n - 1), left) / qt.expect(n, left) ** 2


def inversion(d, alpha, g, t):
    a, lower = qt.tensor(qt.destroy(d), qt.qeye(2)), qt.tensor(qt.qeye(d), qt.sigmam())
    psi = (-1j * g * t * (a * lower.dag() + a.dag() * lower)).expm() * qt.tensor(coherent(d, alpha), qt.basis(2, 0))
    return qt.expect(qt.tensor(qt.qeye(d), qt.sigmaz()), psi)


def mandel(rho):
    n = qt.num(rho.shape[0])
    mean = qt.expect(n, rho)
    return (qt.expect(n * n, rho) - mean**2) / mean - 1


def damped(d, n, kappa, t, nbar):
    a = qt.destroy(d)
    jumps = [np.sqrt(kappa * (1 + nbar)) * a, np.sqrt(kappa * nbar) * a.dag()]
    return qt.mesolve(0 * a, qt.fock_dm(d, n), [0, t], jumps, [], options=OPTIONS).states[-1]


KINDS = {
    0: lambda v: p(coherent(ONE, v["alpha"]), v["n"]),
    1: lambda v: p(
        qt.displace(ONE, v["alpha"]) * qt.squeeze(ONE, v["r"] * np.exp(1j * v["phi"])) * qt.basis(ONE, 0), v["n"]
    ),
    2: lambda v: p(amplified(qt.ket2dm(coherent(ONE, v["alpha"])), v["G"]), v["n"]),
    3: lambda v: abs(
        (splitter(TWO, v["T"]) * qt.tensor(qt.basis(TWO, v["n"]), qt.basis(TWO, v["m"]))).full()[
            v["k"] * TWO + v["n"] + v["m"] - v["k"], 0
        ]
    )
    ** 2,
    4: lambda v: qt.expect(
        qt.tensor(qt.num(20), qt.num(20)),
        splitter(20, v["T"]) * qt.tensor(coherent(20, v["alpha"]), qt.basis(20, v["n"])),
    ),
    5: lambda v: float(qt.wigner(lossy(cat(40, v["alpha"]), v["eta"]), [v["x"]], [v["p"]], g=np.sqrt(2))[0, 0]),
    6: lambda v: float(
        np.real(((1j * np.pi * qt.num(40)).expm() * lossy(cat(40, v["alpha"], v["theta"]), v["eta"])).tr())
    ),
    7: lambda v: heralded(16, v["r"], v["eta"], v["n"]),
    8: lambda v: subtracted(24, v["r"], v["T"]),
    9: lambda v: p(damped(40, v["n"], v["kappa"], v["t"], v["nbar"]), v["m"]),
    10: lambda v: inversion(60, v["alpha"], v["g"], v["t"]),
    11: lambda v: mandel(amplified(qt.fock_dm(ONE, v["n"]), v["G"])),
}

for line in sys.stdin:
    key = json.loads(line)
    print(KINDS[key["kind"]](key["givens"]))
