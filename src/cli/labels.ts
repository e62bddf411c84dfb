import { type Irrep, irrepName, sameIrrep } from "../su3/irrep.js";

interface Place {
  readonly threeY: number;
  readonly twoI: number;
}

const BARYON_NAMES: Readonly<Record<string, string>> = {
  "3,1": "N",
  "0,2": "Sigma",
  "0,0": "Lambda",
  "-3,1": "Xi",
};
const DECUPLET_NAMES: Readonly<Record<string, string>> = {
  "3,3": "Delta",
  "0,2": "Sigma",
  "-3,1": "Xi",
  "-6,0": "Omega",
};
const MESON_NAMES: Readonly<Record<string, string>> = {
  "3,1": "K",
  "0,2": "pi",
  "0,0": "eta",
  "-3,1": "Kbar",
};

/** `1 parent`, `2 parents`; with a plural that is not regular where it is given. */
export function counted(count: number, noun: string, plural = `${noun}s`): string {
  return `${count} ${count === 1 ? noun : plural}`;
}

/** `1 degree of freedom`. */
export function degreesText(ndf: number | null | undefined): string {
  return counted(ndf ?? 0, "degree of freedom", "degrees of freedom");
}

/** A quantum number given as a multiple of 1/`unit`, e.g. `1/2`. */
export function fractionText(multiple: number, unit: number): string {
  return multiple % unit === 0 ? String(multiple / unit) : `${multiple}/${unit}`;
}

/** `Y=1 I=1/2`. */
export function placeText({ threeY, twoI }: Place): string {
  return `Y=${fractionText(threeY, 3)} I=${fractionText(twoI, 2)}`;
}

/**
 * Short name of an isospin multiplet in an irrep, as the printed tables use them: baryon names in the first factor and
 * in products, meson names in the second factor; `(Y, I)` outside octet and decuplet.
 */
export function placeName(irrep: Irrep, place: Place, role: "first" | "second"): string {
  const key = `${place.threeY},${place.twoI}`;
  const octet = role === "first" ? BARYON_NAMES : MESON_NAMES;
  const names = sameIrrep(irrep, { p: 1, q: 1 })
    ? octet
    : role === "first" && sameIrrep(irrep, { p: 3, q: 0 })
      ? DECUPLET_NAMES
      : {};
  return names[key] ?? `(${fractionText(place.threeY, 3)},${fractionText(place.twoI, 2)})`;
}

/** `8_2` for the second of several copies, `10` for a single one. */
export function copyName(irrep: Irrep, copy: number, multiplicity: number): string {
  return multiplicity > 1 ? `${irrepName(irrep)}_${copy}` : irrepName(irrep);
}
