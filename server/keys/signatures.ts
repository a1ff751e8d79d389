/** A function as editors show it. */
export interface KeySignature {
  readonly name: string;
  /** For example `photonProbability(state, n)`. */
  readonly signature: string;
  /** One line. */
  readonly summary: string;
  /** KaTeX; empty where a word says it better. */
  readonly formula: string;
}

const entry = (signature: string, summary: string, formula = ''): KeySignature => ({
  name: signature.slice(0, signature.indexOf('(')),
  signature,
  summary,
  formula,
});

/** Every function of the language that knows of light, in the order of the language's description. */
export const keySignatures: readonly KeySignature[] = [
  entry('vacuum()', 'The state without a quantum.', '|0\\rangle'),
  entry('fock(n)', 'The number state of n quanta.', '|n\\rangle'),
  entry('ket(n, m)', 'A number state of one mode, or of two; may be superposed.', '|n,m\\rangle'),
  entry('coherent(alpha)', 'The coherent state of amplitude α.', 'D(\\alpha)|0\\rangle'),
  entry('thermal(nbar)', 'Thermal light of n̄ quanta.', 'P(n)=\\bar n^n/(1+\\bar n)^{n+1}'),
  entry('squeezed(r, phi=0)', 'Squeezed vacuum.', 'S(re^{i\\varphi})|0\\rangle'),
  entry(
    'cat(alpha, theta=0)',
    'A superposition of two coherent states.',
    '\\propto|\\alpha\\rangle+e^{i\\theta}|{-\\alpha}\\rangle',
  ),
  entry(
    'displaced(state, alpha)',
    'A state displaced in phase space; of a joint state displaced(joint, mode, alpha).',
    'D(\\alpha)',
  ),
  entry(
    'squeeze(state, r, phi=0)',
    'A state that is squeezed; of a joint state squeeze(joint, mode, r, phi).',
    'S(re^{i\\varphi})',
  ),
  entry('mixture(probabilities, states)', 'A mixture; the probabilities add to 1.', '\\sum_k p_k\\rho_k'),
  entry('phaseAveraged(state)', 'A state whose phase is wholly unknown.', '\\rho_{mn}\\to\\delta_{mn}\\rho_{nn}'),
  entry(
    'dephased(state, sigma)',
    'A state whose phase is blurred by σ.',
    '\\rho_{mn}\\to\\rho_{mn}e^{-\\sigma^2(m-n)^2/2}',
  ),
  entry('photonAdded(state, k=1)', 'A state after k quanta were added, renormalised.', 'a^{\\dagger k}\\rho a^k'),
  entry(
    'photonSubtracted(state, k=1)',
    'A state after k quanta were subtracted, renormalised.',
    'a^k\\rho a^{\\dagger k}',
  ),
  entry('product(state1, state2)', 'Two modes, each in a state of its own.', '\\rho_1\\otimes\\rho_2'),
  entry('twinBeam(r, phi=0)', 'Two-mode squeezed vacuum.', '\\sum_n(e^{i\\varphi}\\tanh r)^n|n,n\\rangle/\\cosh r'),
  entry('noon(N, theta=0)', 'N quanta in one mode or the other.', '(|N,0\\rangle+e^{i\\theta}|0,N\\rangle)/\\sqrt2'),
  entry(
    'twoModeSqueeze(joint, r, phi=0)',
    'Two-mode squeezing of a joint state.',
    'e^{\\zeta a_1^\\dagger a_2^\\dagger-\\zeta^*a_1a_2}',
  ),
  entry(
    'beamSplitter(joint, T, phi=pi/2)',
    'Two modes behind a splitter of transmittance T.',
    'b_1=\\sqrt T a_1+e^{i\\varphi}\\sqrt R a_2',
  ),
  entry(
    'phaseShift(state, phi)',
    'A phase shift; of a joint state phaseShift(joint, mode, phi).',
    'a\\to e^{i\\varphi}a',
  ),
  entry('machZehnder(joint, T1, phi, T2)', 'Two splitters with a phase on mode 1 between them.'),
  entry(
    'lose(state, eta)',
    'A loss of transmissivity η; of a joint state lose(joint, mode, eta).',
    'a\\to\\sqrt\\eta\\,a+\\sqrt{1-\\eta}\\,v',
  ),
  entry(
    'damp(state, kappa, t, nbar=0, omega=0)',
    'A damped oscillator after a time t, in a bath of n̄ quanta.',
    '\\langle a\\rangle\\to\\langle a\\rangle e^{-(\\kappa/2+i\\omega)t}',
  ),
  entry(
    'amplify(state, G, nbar=0)',
    'A phase-insensitive amplifier of gain G; of a joint state amplify(joint, mode, G, nbar).',
    '\\langle n\\rangle\\to G\\langle n\\rangle+(G-1)(1+\\bar n)',
  ),
  entry(
    'invert(state, kappa, t, nbar=0, omega=0)',
    'An inverted oscillator after a time t.',
    '\\langle a\\rangle\\to\\langle a\\rangle e^{+(\\kappa/2+i\\omega)t}',
  ),
  entry('output(joint, mode)', 'The reduced state of mode 1 or 2.', '\\mathrm{Tr}_k\\,\\rho'),
  entry('heralded(joint, mode, n)', 'The other mode, given n quanta found in this one.'),
  entry('heraldProbability(joint, mode, n)', 'The probability of finding n quanta in a mode.'),
  entry('clicked(joint, mode, eta=1, dark=0)', 'The other mode, given a click of a detector in this one.'),
  entry('clickProbability(joint, mode, eta=1, dark=0)', 'The probability of a click in a mode.'),
  entry(
    'bathAmplitude(t, omega, frequencies, couplings)',
    'u(t) of an oscillator coupled to a finite bath.',
    'a(t)=u\\,a+\\sum_kv_kb_k',
  ),
  entry(
    'invertedBathAmplitude(t, omega, frequencies, couplings)',
    'The same for the inverted oscillator.',
    'a(t)=u\\,a+\\sum_kv_kb_k^\\dagger',
  ),
  entry('photonProbability(state, n)', 'The probability of n quanta.', 'P(n)=\\langle n|\\rho|n\\rangle'),
  entry('photonDistribution(state, nmax)', 'The list P(0) … P(nmax).'),
  entry('meanPhotons(state)', 'The mean number of quanta.', '\\langle a^\\dagger a\\rangle'),
  entry('photonVariance(state)', 'The variance of the number of quanta.', '\\langle n^2\\rangle-\\langle n\\rangle^2'),
  entry('mandelQ(state)', "Mandel's parameter.", 'Q=(\\mathrm{Var}\\,n-\\langle n\\rangle)/\\langle n\\rangle'),
  entry('fanoFactor(state)', 'The Fano factor.', '\\mathrm{Var}\\,n/\\langle n\\rangle'),
  entry('parity(state)', 'The mean parity.', '\\langle(-1)^n\\rangle'),
  entry('g2(state)', 'Second-order coherence at no delay.', '\\langle a^{\\dagger2}a^2\\rangle/\\langle n\\rangle^2'),
  entry('gN(state, N)', 'Coherence of order N at no delay.', '\\langle a^{\\dagger N}a^N\\rangle/\\langle n\\rangle^N'),
  entry('countProbability(state, m, eta=1, dark=0)', 'The probability of m counts, with efficiency η and dark counts.'),
  entry('amplitude(state)', 'The mean amplitude.', '\\langle a\\rangle'),
  entry('quadratureMean(state, theta)', 'The mean of a quadrature.', '\\langle x_\\theta\\rangle'),
  entry('quadratureVariance(state, theta)', 'The variance of a quadrature.', '\\mathrm{Var}\\,x_\\theta'),
  entry(
    'quadratureDensity(state, x, theta)',
    'The probability density of a quadrature.',
    '\\langle x_\\theta|\\rho|x_\\theta\\rangle',
  ),
  entry('wigner(state, x, p)', 'The Wigner function.', 'W(x,p)'),
  entry('husimi(state, alpha)', 'The Husimi function.', 'Q(\\alpha)=\\langle\\alpha|\\rho|\\alpha\\rangle/\\pi'),
  entry('pFunction(state, alpha)', 'The P function, where it is an ordinary function.', 'P(\\alpha)'),
  entry(
    'characteristic(state, xi, s=0)',
    'The characteristic function of order s.',
    '\\mathrm{Tr}[\\rho D(\\xi)]e^{s|\\xi|^2/2}',
  ),
  entry('wignerNegativity(state)', 'The negative volume of the Wigner function, twice.', '\\int|W|\\,dx\\,dp-1'),
  entry('purity(state)', 'The purity.', '\\mathrm{Tr}\\,\\rho^2'),
  entry('entropy(state)', 'The entropy in nats.', '-\\mathrm{Tr}\\,\\rho\\ln\\rho'),
  entry(
    'fidelity(state1, state2)',
    'The fidelity of two states.',
    '(\\mathrm{Tr}\\sqrt{\\sqrt\\rho\\,\\sigma\\sqrt\\rho})^2',
  ),
  entry('overlap(state1, state2)', 'The overlap of two pure states.', '\\langle\\psi|\\varphi\\rangle'),
  entry('matrixElement(state, m, n)', 'An element of the density matrix.', '\\rho_{mn}'),
  entry('densityMatrix(state, nmax)', 'The block of the density matrix up to nmax.'),
  entry('covariance(state)', 'The covariance matrix of x and p.'),
  entry('atomInversion(state, g, t)', 'The inversion of an excited atom in the field.', '\\rho_{ee}-\\rho_{gg}'),
  entry('jointProbability(joint, n, m)', 'The probability of n and m quanta.', 'P(n,m)'),
  entry('coincidence(joint)', 'The mean of the product of both numbers.', '\\langle n_1n_2\\rangle'),
  entry('g2Cross(joint)', 'Cross coherence.', '\\langle n_1n_2\\rangle/(\\langle n_1\\rangle\\langle n_2\\rangle)'),
  entry(
    'visibility(joint)',
    'Visibility of the fringes of both modes.',
    '2|\\langle a_1^\\dagger a_2\\rangle|/(\\langle n_1\\rangle+\\langle n_2\\rangle)',
  ),
  entry('fieldCorrelation(joint)', 'The correlation of both fields.', '\\langle a_1^\\dagger a_2\\rangle'),
  entry('logNegativity(joint)', 'The logarithmic negativity, in base 2.', '\\log_2\\lVert\\rho^{T_2}\\rVert_1'),
  entry(
    'thermalOccupation(frequency, temperature)',
    'Thermal quanta of a mode; both with units.',
    '1/(e^{h\\nu/k_BT}-1)',
  ),
  entry('photonEnergy(wavelengthOrFrequency)', 'The energy of a photon, in J.', 'h\\nu'),
  entry('photonFlux(power, wavelength)', 'Photons per second of a beam.', 'P\\lambda/hc'),
  entry(
    'spontaneousRate(angularFrequency, dipole)',
    'The rate of spontaneous emission, in s^-1.',
    '\\omega^3d^2/(3\\pi\\varepsilon_0\\hbar c^3)',
  ),
  entry('laguerre(n, a, x)', 'The generalised Laguerre polynomial.', 'L_n^{(a)}(x)'),
  entry('hermite(n, x)', "The physicists' Hermite polynomial.", 'H_n(x)'),
  entry('besselI(n, x)', 'The modified Bessel function.', 'I_n(x)'),
  entry('besselJ(n, x)', 'The Bessel function.', 'J_n(x)'),
];
