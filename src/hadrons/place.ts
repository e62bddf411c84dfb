import { refuse } from "../require.js";
import {
  hasMultiplet,
  type Irrep,
  type IsospinMultiplet,
  irrepName,
  isospinMultiplets,
} from "../su3/irrep.js";
import { placeText } from "./multiplet.js";

/** Names in daily use and the place they stand for, [3Y, 2I]; the mass in brackets is not part of the name. */
const PLACES: Readonly<Record<string, readonly [number, number]>> = {
  N: [3, 1],
  Lambda: [0, 0],
  Sigma: [0, 2],
  Xi: [-3, 1],
  Delta: [3, 3],
  Omega: [-6, 0],
  Theta: [6, 0],
  pi: [0, 2],
  rho: [0, 2],
  a0: [0, 2],
  a1: [0, 2],
  a2: [0, 2],
  b1: [0, 2],
  eta: [0, 0],
  "eta'": [0, 0],
  omega: [0, 0],
  phi: [0, 0],
  f0: [0, 0],
  f1: [0, 0],
  f2: [0, 0],
  "f2'": [0, 0],
  h1: [0, 0],
  K: [3, 1],
  "K*": [3, 1],
  "K0*": [3, 1],
  K1: [3, 1],
  "K2*": [3, 1],
  Kbar: [-3, 1],
  "Kbar*": [-3, 1],
  "Kbar0*": [-3, 1],
  Kbar1: [-3, 1],
  "Kbar2*": [-3, 1],
  D: [-1, 1],
  D_s: [2, 0],
  Lambda_c: [2, 0],
  Sigma_c: [2, 2],
  Xi_c: [-1, 1],
  "Xi_c'": [-1, 1],
  Omega_c: [-4, 0],
};

/**
 * The isospin multiplet of an irrep that a name in daily use stands for.
 *
 * Reads `N`, `Lambda`, `Sigma`, `Xi`, `Delta`, `Omega`, `pi`, `K`, `Kbar`, `eta` and their like, with or without a mass
 * in brackets (`Sigma(1775)`), and the general form `Y=1 I=3/2`.
 * @throws InputError for a name without a place, or a place the irrep does not have; lists the ones it has
 * @example placeOf({ p: 1, q: 1 }, "Xi(1820)") // { threeY: -3, twoI: 1 }
 */
export function placeOf(irrep: Irrep, name: string): IsospinMultiplet {
  const found = findPlace(irrep, name);
  if (found !== undefined) return found;
  const place = placeFromLabels(name) ?? placeFromName(name);
  const there = isospinMultiplets(irrep).map(placeWithNames).join(", ");
  const meaning = place === undefined ? "" : `${name} stands for ${placeText(place)}. `;
  refuse(
    "placeOf: name",
    `an isospin multiplet of the ${irrepName(irrep)}`,
    name,
    `${meaning}It has: ${there}.`,
  );
}

/** The isospin multiplet of an irrep that a name stands for, as `placeOf` reads it, or undefined. */
export function findPlace(irrep: Irrep, name: string): IsospinMultiplet | undefined {
  const place = placeFromLabels(name) ?? placeFromName(name);
  return place !== undefined && hasMultiplet(irrep, place) ? place : undefined;
}

const BARYON = /^(N|Lambda|Sigma|Xi|Delta|Omega|Theta)$/;

/**
 * The usual name of a place for baryons or for mesons, else its labels.
 *
 * @example usualPlaceName({ threeY: -3, twoI: 1 }, 1) // "Xi"; "Kbar" for baryon number 0
 */
export function usualPlaceName(place: IsospinMultiplet, baryonNumber: number): string {
  const names = Object.keys(PLACES).filter((name) => sameAs(PLACES[name]!, place));
  const fits = (name: string) => isGeneric(name) && BARYON.test(name) === (baryonNumber !== 0);
  return names.find(fits) ?? placeText(place);
}

function placeFromName(name: string): IsospinMultiplet | undefined {
  const bare = name.replace(/\(\d+\)$/, "");
  if (!Object.hasOwn(PLACES, bare)) return undefined;
  const [threeY, twoI] = PLACES[bare]!;
  return { threeY, twoI };
}

function placeFromLabels(text: string): IsospinMultiplet | undefined {
  const match = /^Y=(-?\d+)(\/3)? I=(\d+)(\/2)?$/.exec(text.trim());
  if (match === null) return undefined;
  const [, y, thirds, i, halves] = match;
  return { threeY: Number(y) * (thirds ? 1 : 3), twoI: Number(i) * (halves ? 1 : 2) };
}

function placeWithNames(place: IsospinMultiplet): string {
  const names = Object.keys(PLACES).filter((name) => isGeneric(name) && sameAs(PLACES[name]!, place));
  return names.length === 0 ? placeText(place) : `${placeText(place)} (${names.join(" or ")})`;
}

/** Of many names for one place, a message lists the baryons and the pseudoscalars. */
function isGeneric(name: string): boolean {
  return /^([A-Z][a-z_]*'?|pi|eta)$/.test(name);
}

function sameAs([threeY, twoI]: readonly [number, number], place: IsospinMultiplet): boolean {
  return threeY === place.threeY && twoI === place.twoI;
}
