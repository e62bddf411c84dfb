import { type Fit, fitModel } from "../../src/model/fit-model.js";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { readStudy } from "../../src/study/read-study.js";

/** The fit of a study given as text. */
export function fitOf(text: string): Fit {
  return fitModel(resolveStudy(readStudy(Buffer.from(text), "study.yaml")));
}

/** An octet into two octets, with eta and eta' mixed; invented numbers. */
export const MIXED_OCTET = `couplet: 1
title: an invented octet with mixed eta
multiplets:
  r:
    irrep: 8
    spinParity: 3/2-
    members:
      - { name: N(1577), place: N, mass: 1577 MeV, width: sum }
      - { name: Sigma(1731), place: Sigma, mass: 1731 MeV, width: sum }
      - { name: Lambda(1718), place: Lambda, mass: 1718 MeV, width: sum }
mixing:
  - bare: [pseudoscalar-octet/eta, pseudoscalar-singlet/eta']
    states: [{ name: eta }, { name: eta'(958) }]
    angle: -0.26 rad
    convention: meson
decays:
  - { name: octet, from: r, to: [baryon-octet, pseudoscalar-octet], L: 2, model: { id: a, n: 2 } }
  - { name: singlet, from: r, to: [baryon-octet, pseudoscalar-singlet], L: 2, model: { id: a, n: 2 } }
fit: { mirrors: best }
measurements:
  - { width: N(1577) -> N pi, value: 66 +- 7 MeV, source: invented }
  - { width: N(1577) -> N eta, value: 2 +- 0.7 MeV, source: invented }
  - { width: Lambda(1718) -> N Kbar, value: 20 +- 3 MeV, source: invented }
  - { width: Lambda(1718) -> Sigma pi, value: 9.5 +- 2.8 MeV, source: invented }
`;

/** Vector mesons into pairs from one multiplet. */
export const VECTORS = `couplet: 1
title: vector mesons into two pseudoscalars
decays:
  - { from: vector-octet, to: [pseudoscalar-octet, pseudoscalar-octet], L: 1, model: { id: a, n: 2 } }
measurements:
  - { width: rho(770) -> pi pi, value: 149 +- 1 MeV, source: invented rounding }
`;

/** Members of a 27, which has no matrix form. */
export const TWENTY_SEVEN = `couplet: 1
title: part of an invented 27
multiplets:
  r:
    irrep: 27
    spinParity: 3/2-
    members:
      - { name: Theta1(1900), place: Y=2 I=1, mass: 1900 MeV, width: sum }
decays:
  - { from: r, to: [baryon-octet, pseudoscalar-octet], L: 2, model: { id: a, n: 1 } }
measurements:
  - { width: Theta1(1900) -> N K, value: 20 +- 3 MeV, source: invented }
`;

/** A decuplet into decuplet and octet, with an exact zero. */
export const DECUPLET = `couplet: 1
title: an invented decuplet
multiplets:
  r:
    irrep: 10
    spinParity: 3/2-
    members:
      - { name: Delta(1700), place: Delta, mass: 1700 MeV, width: sum }
      - { name: Sigma(1940), place: Sigma, mass: 1940 MeV, width: sum }
decays:
  - { from: r, to: [baryon-decuplet, pseudoscalar-octet], L: 0, model: { id: a, n: 1 } }
measurements:
  - { width: Delta(1700) -> Delta(1232) pi, value: 120 +- 30 MeV, source: invented }
`;
