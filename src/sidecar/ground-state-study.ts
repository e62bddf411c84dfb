/**
 * The study behind the tables that are served without a file: the 3/2+ baryon decuplet, and the 1- mesons that need no
 * mixing (phi(1020) and omega(782) are left out for that reason).
 *
 * Masses and total widths are the catalogue's. Fractions: R.L. Workman et al. (Particle Data Group), Prog. Theor. Exp.
 * Phys. 2022, 083C01 (2022), with the update of 2023; provenance: read, in its machine-readable edition, where an entry
 * says so, else memory.
 */
export const GROUND_STATE_STUDY = `# Ground-state hadrons, built into Couplet. Masses and total widths: the catalogue's.
couplet: 1
title: Ground-state hadrons (built in)
multiplets:
  decuplet:
    irrep: 10
    spinParity: 3/2+
    members:
      - { name: Delta(1232), place: Delta }
      - { name: Sigma(1385), place: Sigma }
      - { name: Xi(1530), place: Xi }
  vectors:
    irrep: 8
    spinParity: 1-
    members:
      - { name: rho(770), place: pi }
      - { name: K*(892), place: K }
      - { name: Kbar*(892), place: Kbar }
decays:
  - { name: decuplet, from: decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
  - { name: vectors, from: vectors, to: [pseudoscalar-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { fraction: Delta(1232) -> N pi, value: 0.994, use: table, source: "PDG RPP 2022 (update 2023), B033.1, read" }
  - { width: Delta(1232) -> N pi, value: 116.3 +- 3.0 MeV, use: fit, source: "PDG RPP 2022 (update 2023), B033.1 times B033W (117 +- 3 MeV), read" }
  - { fraction: Sigma(1385) -> Lambda pi, value: 0.870 +- 0.015, source: "PDG RPP 2022 (update 2023), B043.1, read" }
  - { fraction: Sigma(1385) -> Sigma pi, value: 0.117 +- 0.015, source: "PDG RPP 2022 (update 2023), B043.2, read" }
  - { fraction: Xi(1530) -> Xi pi, value: 1, use: table, source: "PDG RPP 2022 (update 2023), B049.1, read" }
  - { width: Xi(1530)0 -> Xi pi, value: 9.1 +- 0.5 MeV, use: fit, source: "PDG RPP 2022 (update 2023), B049W0 times B049.1 (1), read" }
  - { fraction: rho(770) -> pi pi, value: 1, use: table, source: "PDG RPP, approximately 100 %, from memory" }
  - { width: rho(770)0 -> pi pi, value: 147.4 +- 0.8 MeV, use: fit, source: "PDG RPP 2024, width of rho(770)0 (read), all of it to pi pi (from memory)" }
  - { fraction: K*(892) -> K pi, value: 1, use: table, source: "PDG RPP, approximately 100 %, from memory" }
  - { fraction: Kbar*(892) -> Kbar pi, value: 1, use: table, source: "PDG RPP, approximately 100 %, from memory" }
`;
