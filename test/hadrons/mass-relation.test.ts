import { expect, test } from "vitest";
import { gellMannOkuboMassMeV } from "../../src/hadrons/mass-relation.js";

const N = { threeY: 3, twoI: 1 };
const Lambda = { threeY: 0, twoI: 0 };
const Sigma = { threeY: 0, twoI: 2 };
const Xi = { threeY: -3, twoI: 1 };
const Delta = { threeY: 3, twoI: 3 };
const Omega = { threeY: -6, twoI: 0 };

// Masses of the Particle Data Group, from memory.
const OCTET = [
  { ...N, massMeV: 938.919 },
  { ...Lambda, massMeV: 1115.683 },
  { ...Sigma, massMeV: 1193.154 },
];

test("three masses of the ground-state octet give the fourth by 2(N + Xi) = 3 Lambda + Sigma, 1.1 % from the measured one", () => {
  const xi = gellMannOkuboMassMeV(OCTET, Xi, 1);
  expect(xi).toBeCloseTo((3 * 1115.683 + 1193.154) / 2 - 938.919, 9);
  // (3 Lambda + Sigma)/(2 (N + Xi)) - 1 = 0.005714 with the measured Xi of 1318.285.
  expect((xi + 938.919) / (1318.285 + 938.919) - 1).toBeCloseTo(0.005714, 5);
});

test("two masses of a decuplet fix the others by equal spacing", () => {
  const known = [
    { ...Delta, massMeV: 1232 },
    { ...Sigma, massMeV: 1384.6 },
  ];
  expect(gellMannOkuboMassMeV(known, Xi, 1)).toBeCloseTo(1384.6 + 152.6, 9);
  expect(gellMannOkuboMassMeV(known, Omega, 1)).toBeCloseTo(1384.6 + 2 * 152.6, 9);
});

test("mesons obey it in squares: the eta of kaon and pion is near 566 MeV", () => {
  const known = [
    { threeY: 3, twoI: 1, massMeV: 495.644 },
    { threeY: 0, twoI: 2, massMeV: 138.039 },
    { threeY: -3, twoI: 1, massMeV: 495.644 },
  ];
  const eta = gellMannOkuboMassMeV(known, Lambda, 2);
  expect(eta).toBeCloseTo(Math.sqrt((4 * 495.644 ** 2 - 138.039 ** 2) / 3), 9);
});

test("masses that do not fix the one wanted are refused", () => {
  expect(() => gellMannOkuboMassMeV(OCTET.slice(0, 2), Xi, 1)).toThrow(
    'mass relation: expected members whose masses fix that of Y=-1 I=1/2, got "Y=1 I=1/2, Y=0 I=0". Give the mass, or add members.',
  );
});

test("masses far from obeying it give a baryon a mass below 0, and a meson none", () => {
  const heavy = [
    { ...N, massMeV: 2000 },
    { ...Lambda, massMeV: 500 },
    { ...Sigma, massMeV: 500 },
  ];
  // 2(N + Xi) = 3 Lambda + Sigma.
  expect(gellMannOkuboMassMeV(heavy, Xi, 1)).toBeCloseTo(-1000, 9);
  expect(() => gellMannOkuboMassMeV(heavy, Xi, 2)).toThrow(
    /^mass relation: expected a squared mass > 0, got -3[45]\d+.*\. Check the masses of the other members\.$/,
  );
});
