import { findLightParticle } from "../hadrons/light-particles.js";
import { type MultipletQuantumNumbers, placeText } from "../hadrons/multiplet.js";
import { isChargeStateName, namesake } from "../hadrons/namesake.js";
import { refuse } from "../require.js";
import type { IsospinMultiplet } from "../su3/irrep.js";

/** Relative difference of masses within which two states of a name and of equal quantum numbers may be the same. */
const SAME_MASS = 0.1;

/**
 * Refuses the name of a particle of the catalogue for a hadron that is another one: it would take over that particle's
 * Monte Carlo number, and stand for it in modes.
 *
 * Place, baryon number, charm, spin and parity must be the catalogue's where it has them; the mass must be within 10 % or
 * the catalogue's width, whichever is more: the mass of a broad state depends on how it is defined.
 * @param massMeV - mean of the charge states
 * @throws InputError that says what the catalogue has for the name
 */
export function requireOwnName(
  name: string,
  place: IsospinMultiplet,
  quantum: MultipletQuantumNumbers,
  massMeV: number,
): void {
  if (isChargeStateName(name)) {
    const mend = "A member is a whole isospin multiplet; the names of its charge states follow from its own.";
    refuse(name, "a name that is not taken", `${name}, one charge state of the catalogue`, mend);
  }
  if (findLightParticle(name) !== undefined)
    refuse(name, "a name that is not taken", `${name}, no hadron`, "Choose another name.");
  const known = namesake(name);
  if (known === undefined) return;
  const { twoJ, parity, baryonNumber, charm, strangeness, twoI } = known;
  const knownPlace = { threeY: 3 * baryonNumber + 3 * strangeness - charm, twoI };
  const numbers: [what: string, known: string, own: string][] = [
    ["baryon number", String(baryonNumber), String(quantum.baryonNumber)],
    ["charm", String(charm), String(quantum.charm)],
    ["the place", placeText(knownPlace), placeText(place)],
    [
      "spin-parity",
      spinParity(twoJ ?? quantum.twoJ, parity ?? quantum.parity),
      spinParity(quantum.twoJ, quantum.parity),
    ],
  ];
  const other = numbers.find(([, theirs, ours]) => theirs !== ours);
  if (other !== undefined) {
    const [what, theirs, ours] = other;
    refuseName(name, `${what} ${theirs}`, ours, massMeV);
  }
  const slack = Math.max(SAME_MASS * known.massMeV, known.widthMeV ?? 0);
  if (Math.abs(massMeV - known.massMeV) > slack)
    refuseName(name, `a mass near ${known.massMeV.toFixed(0)} MeV`, `${massMeV.toFixed(0)} MeV`, massMeV);
}

function refuseName(name: string, theirs: string, ours: string, massMeV: number): never {
  const stem = name.replace(/\(.*\)$/, "");
  const mend =
    stem === name
      ? `Give the resonance its mass in the name, e.g. ${stem}(${massMeV.toFixed(0)}).`
      : "Correct it, or give the resonance another name.";
  refuse(name, `a name that is not taken, or ${theirs} as the catalogue has for ${name}`, ours, mend);
}

/** Spin and parity as a study writes them. */
function spinParity(twoJ: number, parity: 1 | -1): string {
  return `${twoJ % 2 === 0 ? twoJ / 2 : `${twoJ}/2`}${parity === 1 ? "+" : "-"}`;
}
