/** The study that `couplet demo` writes. Everything in it is invented, and it says so. */
export const DEMO_STUDY = `# An invented study: the resonances, the experiment and every number below are made up.
#
# The story: a kaon beam on a hydrogen target, ten weeks of running of an experiment that does not exist ("Larkfield").
# It saw an octet of excited hyperons of spin and parity 3/2-, measured some of their decays, and now its simulation
# needs all of them. SU(3) flavour symmetry fills the holes: two reduced couplings, F and D, are fitted to seven numbers.
couplet: 1
title: An invented 3/2- hyperon octet of the invented Larkfield kaon-beam run

multiplets:
  larkfield:
    irrep: 8
    spinParity: 3/2-
    members:
      - { name: N(1577), place: N, mass: 1577 +- 6 MeV, width: 128 +- 12 MeV }
      - { name: Sigma(1731), place: Sigma, mass: 1731 +- 5 MeV, width: 34 +- 5 MeV }
      - { name: Lambda(1718), place: Lambda, mass: 1.718 GeV, width: 61 +- 6 MeV }
      - { name: Xi(1874), place: Xi, mass: 1874 +- 8 MeV, width: sum }

decays:
  - from: larkfield
    to: [baryon-octet, pseudoscalar-octet]   # baryon first, meson second: the order fixes the sign of F
    L: 2
    model: { id: a, n: 2 }
    masses: charge

measurements:
  - { width: N(1577) -> N pi, value: 66 +- 7 MeV, source: "invented: Larkfield, elastic phase" }
  - { fraction: Lambda(1718) -> N Kbar, value: 0.44 +- 0.14, source: "invented: Larkfield, formation" }
  - { width: Lambda(1718) -> Sigma pi, value: 9.5 +- 2.8 MeV, source: "invented: Larkfield, formation" }
  - { width: Sigma(1731) -> N Kbar, value: 2.0 +0.7 -0.5 MeV, source: "invented: Larkfield, formation" }
  - { fraction: Sigma(1731) -> Lambda pi, value: 21 +- 7 %, source: "invented: Larkfield, formation" }
  - ratio: [Sigma(1731) -> N Kbar, Sigma(1731) -> Lambda pi]
    value: 0.30 +- 0.12
    source: "invented: Larkfield, production"
  # This one does not agree with the others: watch its pull.
  - { width: Xi(1874) -> Sigma Kbar, value: 4.4 +- 2.2 MeV, source: "invented: an older run" }

# Sigma0, eta and pi0 decay as measured (these decays are real), so that every cascade ends in particles that live long.
tables: { daughters: decayed }
`;
