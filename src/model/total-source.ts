import { catalogueEdition } from "../hadrons/catalogue.js";
import type { Study } from "../study/study.js";

/** What follows an isospin multiplet's name in that of a charge state. */
const CHARGE_SUFFIX = /^[+0-]*(bar)?$/;

/** Where a hadron's own total width comes from: "study" where the study gives one, else the edition of the catalogue. */
export function totalSource({ multiplets, mixing, particles }: Study, hadron: string): string {
  const members = [
    ...Object.values(multiplets).flatMap((multiplet) => [...multiplet.members]),
    ...mixing.flatMap(({ states }) => [...states]),
  ];
  const isGiven =
    particles.some(({ name, width }) => name === hadron && width !== undefined) ||
    members.some(
      ({ name, width, chargeStates }) =>
        hadron.startsWith(name) &&
        CHARGE_SUFFIX.test(hadron.slice(name.length)) &&
        (width !== undefined || chargeStates[hadron]?.width !== undefined),
    );
  return isGiven ? "study" : catalogueEdition().edition;
}
