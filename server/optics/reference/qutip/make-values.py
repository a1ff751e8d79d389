"""Makes values.ndjson: seeded random keys and what QuTiP finds for them, a general-purpose library of other authors.

Run with the system's Python and Debian's packages (`apt-get install python3-qutip`):

    /usr/bin/python3 server/optics/reference/qutip/make-values.py > server/optics/reference/qutip/values.ndjson

Every state is built in a basis of DIMENSION levels a mode, and once more in one of WIDER levels; the difference of both
values is the truncation error that a line states, with a floor of 1e-12 for QuTiP's own rounding. Lines whose error is
above 1e-6 of the value are left out, so that every line tests something.
"""
import json
import random

import numpy as np
import qutip as qt

SEED = 2026
PER_KIND = 20
ONE, ONE_WIDER = 60, 76
TWO, TWO_WIDER = 16, 20


def coherent(dim, alpha):
    return qt.coherent(dim, alpha, method="analytic")


def squeezer(dim, r, phi):
    # A wider matrix exponential, cut: its edge is not unitary.
    return qt.Qobj(qt.squeeze(dim + 60, r * np.exp(1j * phi)).full()[:dim, :dim])


def displacer(dim, alpha):
    return qt.Qobj(qt.displace(dim + 60, alpha).full()[:dim, :dim])


def density(state):
    return state if state.isoper else qt.ket2dm(state)


def lossy(state, eta):
    """A loss as the exact solution of the damping equation in Kraus operators."""
    rho = density(state)
    dim = rho.shape[0]
    a = qt.destroy(dim)
    damped = qt.Qobj(np.diag(np.sqrt(eta) ** np.arange(dim)))
    out = 0 * rho
    power = qt.qeye(dim)
    weight = 1.0
    for k in range(dim):
        kraus = np.sqrt(weight) * damped * power
        out = out + kraus * rho * kraus.dag()
        power = power * a
        weight *= (1 - eta) / (k + 1)
    return out


def damped(dim, n, kappa, t, nbar):
    a = qt.destroy(dim)
    options = qt.Options(atol=1e-13, rtol=1e-11, nsteps=100000)
    jumps = [np.sqrt(kappa * (1 + nbar)) * a, np.sqrt(kappa * nbar) * a.dag()]
    return qt.mesolve(0 * a, qt.fock_dm(dim, n), [0, t], jumps, [], options=options).states[-1]


def splitter(dim, transmittance):
    a = qt.tensor(qt.destroy(dim), qt.qeye(dim))
    b = qt.tensor(qt.qeye(dim), qt.destroy(dim))
    angle = np.arccos(np.sqrt(transmittance))
    return (1j * angle * (a.dag() * b + a * b.dag())).expm()


def cat(dim, alpha, theta):
    return (coherent(dim, alpha) + np.exp(1j * theta) * coherent(dim, -alpha)).unit()


def number(x):
    return float(np.real(x))


rng = random.Random(SEED)
real = lambda low, high: float(f"{rng.uniform(low, high):.4g}")


def kinds():
    for _ in range(PER_KIND):
        r, phi, x, y, n = real(0, 0.8), real(0, 6), real(-1.2, 1.2), real(-1.2, 1.2), rng.randint(0, 8)
        yield (
            f"photonProbability(displaced(squeezed({r}, {phi}), {x} + {y}*i), {n})",
            ONE, ONE_WIDER,
            lambda d, r=r, phi=phi, x=x, y=y, n=n: number(
                abs((displacer(d, x + 1j * y) * squeezer(d, r, phi) * qt.basis(d, 0)).full()[n, 0]) ** 2
            ),
        )
    for _ in range(PER_KIND):
        alpha, theta, eta = real(0.3, 1.8), real(0, 3), real(0.2, 0.95)
        x, p = real(-2, 2), real(-2, 2)
        yield (
            f"wigner(lose(cat({alpha}, {theta}), {eta}), {x}, {p})",
            ONE, ONE_WIDER,
            # QuTiP's g = sqrt(2) is x = (a + a†)/√2.
            lambda d, alpha=alpha, theta=theta, eta=eta, x=x, p=p: number(
                qt.wigner(lossy(cat(d, alpha, theta), eta), [x], [p], g=np.sqrt(2))[0, 0]
            ),
        )
    for _ in range(PER_KIND):
        alpha, theta, eta = real(0.3, 1.8), real(0, 3), real(0.2, 0.95)
        yield (
            f"entropy(lose(cat({alpha}, {theta}), {eta}))",
            ONE, ONE_WIDER,
            lambda d, alpha=alpha, theta=theta, eta=eta: number(qt.entropy_vn(lossy(cat(d, alpha, theta), eta))),
        )
    for _ in range(PER_KIND):
        n, kappa, t, nbar, m = rng.randint(0, 4), real(0.2, 1.5), real(0.1, 1), real(0, 0.6), rng.randint(0, 4)
        yield (
            f"photonProbability(damp(fock({n}), {kappa}, {t}, {nbar}), {m})",
            36, 44,
            lambda d, n=n, kappa=kappa, t=t, nbar=nbar, m=m: number(damped(d, n, kappa, t, nbar)[m, m]),
        )
    for _ in range(PER_KIND):
        n, m, transmittance = rng.randint(0, 4), rng.randint(0, 4), real(0.05, 0.95)
        k = rng.randint(0, n + m)
        yield (
            f"jointProbability(beamSplitter(ket({n}, {m}), {transmittance}), {k}, {n + m - k})",
            TWO, TWO_WIDER,
            lambda d, n=n, m=m, transmittance=transmittance, k=k: number(
                abs((splitter(d, transmittance) * qt.tensor(qt.basis(d, n), qt.basis(d, m))).full()[k * d + n + m - k, 0])
                ** 2
            ),
        )
    for _ in range(PER_KIND):
        alpha, n, transmittance = real(0.2, 0.8), rng.randint(0, 2), real(0.1, 0.9)
        yield (
            f"abs(fieldCorrelation(beamSplitter(product(coherent({alpha}), fock({n})), {transmittance})))",
            TWO, TWO_WIDER,
            lambda d, alpha=alpha, n=n, transmittance=transmittance: number(
                abs(
                    qt.expect(
                        qt.tensor(qt.create(d), qt.destroy(d)),
                        splitter(d, transmittance) * qt.tensor(coherent(d, alpha), qt.basis(d, n)),
                    )
                )
            ),
        )
    for _ in range(PER_KIND):
        alpha, g, t = real(0.3, 3), real(0.2, 2), real(0.1, 15)
        yield (
            f"atomInversion(coherent({alpha}), {g}, {t})",
            40, 52,
            lambda d, alpha=alpha, g=g, t=t: jaynes_cummings(d, alpha, g, t),
        )
    for _ in range(PER_KIND):
        alpha, nbar, beta = real(0, 1.5), real(0.1, 0.9), real(0.2, 1.2)
        yield (
            f"fidelity(displaced(thermal({nbar}), {alpha}), cat({beta}, 1))",
            ONE, ONE_WIDER,
            # With a pure state it is an expectation value; QuTiP's own fidelity of mixed states keeps five digits only.
            lambda d, alpha=alpha, nbar=nbar, beta=beta: number(
                qt.expect(displacer(d, alpha) * thermal(d, nbar) * displacer(d, alpha).dag(), cat(d, beta, 1))
            ),
        )
    for _ in range(PER_KIND):
        r, eta, n = real(0.05, 0.35), real(0.3, 0.95), rng.randint(0, 2)
        yield (
            f"logNegativity(lose(twinBeam({r}), 2, {eta}))",
            TWO, TWO_WIDER,
            lambda d, r=r, eta=eta: negativity(d, r, eta),
        )
    for _ in range(PER_KIND):
        r, phi, s = real(0, 0.7), real(0, 6), real(-1, 0)
        x, y = real(-1, 1), real(-1, 1)
        yield (
            f"re(characteristic(photonSubtracted(squeezed({r}, {phi})), {x} + {y}*i, {s}))",
            ONE, ONE_WIDER,
            lambda d, r=r, phi=phi, s=s, x=x, y=y: number(
                qt.expect(displacer(d, x + 1j * y), (qt.destroy(d) * squeezer(d, r, phi) * qt.basis(d, 0)).unit())
                * np.exp(s * (x * x + y * y) / 2)
            ),
        )
    for _ in range(PER_KIND):
        alpha, sigma, theta, x = real(0.2, 1.8), real(0.1, 1.5), real(0, 3), real(-2, 2)
        yield (
            f"quadratureDensity(dephased(coherent({alpha}), {sigma}), {x}, {theta})",
            ONE, ONE_WIDER,
            lambda d, alpha=alpha, sigma=sigma, theta=theta, x=x: density_of(d, alpha, sigma, x, theta),
        )


def thermal(dim, nbar):
    return qt.Qobj(np.diag((nbar / (1 + nbar)) ** np.arange(dim) / (1 + nbar)))


def jaynes_cummings(dim, alpha, g, t):
    a = qt.tensor(qt.destroy(dim), qt.qeye(2))
    lower = qt.tensor(qt.qeye(dim), qt.sigmam())
    hamiltonian = g * (a * lower.dag() + a.dag() * lower)
    psi = (-1j * hamiltonian * t).expm() * qt.tensor(coherent(dim, alpha), qt.basis(2, 0))
    return number(qt.expect(qt.tensor(qt.qeye(dim), qt.sigmaz()), psi))


def negativity(dim, r, eta):
    ket = sum(np.tanh(r) ** n / np.cosh(r) * qt.tensor(qt.basis(dim, n), qt.basis(dim, n)) for n in range(dim))
    rho = qt.ket2dm(ket)
    a = qt.tensor(qt.qeye(dim), qt.destroy(dim))
    damped_ = qt.tensor(qt.qeye(dim), qt.Qobj(np.diag(np.sqrt(eta) ** np.arange(dim))))
    out, power, weight = 0 * rho, qt.tensor(qt.qeye(dim), qt.qeye(dim)), 1.0
    for k in range(dim):
        kraus = np.sqrt(weight) * damped_ * power
        out = out + kraus * rho * kraus.dag()
        power = power * a
        weight *= (1 - eta) / (k + 1)
    return float(np.log2(np.abs(np.linalg.eigvalsh(qt.partial_transpose(out, [0, 1]).full())).sum()))


def density_of(dim, alpha, sigma, x, theta):
    rho = qt.ket2dm(coherent(dim, alpha)).full()
    n = np.arange(dim)
    rho = rho * np.exp(-(sigma**2) * (n[:, None] - n[None, :]) ** 2 / 2)
    phi = np.zeros(dim)
    phi[0] = np.pi**-0.25 * np.exp(-x * x / 2)
    phi[1] = np.sqrt(2) * x * phi[0]
    for k in range(2, dim):
        phi[k] = np.sqrt(2 / k) * x * phi[k - 1] - np.sqrt((k - 1) / k) * phi[k - 2]
    bra = phi * np.exp(-1j * theta * n)
    return number(bra @ rho @ bra.conj())


# Beyond truncation: entropy_vn drops small eigenvalues, mesolve integrates to its tolerances.
OWN_ERRORS = {"entropy": 1e-9, "photonProbability(damp": 2e-10, "logNegativity": 1e-9}

for expression, dimension, wider, value_in in kinds():
    narrow, value = value_in(dimension), value_in(wider)
    error = max(1e-12, 4 * abs(value - narrow))
    error = max(error, next((own for name, own in OWN_ERRORS.items() if expression.startswith(name)), 0))
    if error > 1e-6 * max(abs(value), 1e-3):
        continue
    print(
        json.dumps(
            {
                "expression": expression,
                "expected": value,
                "absolute": error,
                "dimension": wider,
                "source": f"QuTiP {qt.__version__}, seed {SEED}",
            }
        )
    )
