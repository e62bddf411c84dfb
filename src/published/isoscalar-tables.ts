import antidecuplet from "./couplet-isoscalar-10bar-from-8x8.json";
import twentySeven from "./couplet-isoscalar-27-from-8x8.json";
import twentySevenOfDecuplet from "./couplet-isoscalar-27-from-10x8.json";
import singlet from "./pdg-isoscalar-1-from-8x8.json";
import octetOfDecuplet from "./pdg-isoscalar-8-from-10x8.json";
import antisymmetricOctet from "./pdg-isoscalar-8a-from-8x8.json";
import symmetricOctet from "./pdg-isoscalar-8s-from-8x8.json";
import decuplet from "./pdg-isoscalar-10-from-8x8.json";
import decupletOfDecuplet from "./pdg-isoscalar-10-from-10x8.json";
import { type PublishedTable, readPublishedTable } from "./published-table.js";
import quarkSinglet from "./quark-model-1-from-3x3bar.json";
import quarkMesons from "./quark-model-8-from-3x3bar.json";
import quarkOctet from "./quark-model-8-from-6x3.json";
import quarkDecuplet from "./quark-model-10-from-6x3.json";

/** All blocks of isoscalar factors found by others that Couplet carries, each with its source; 13 tables. */
export function publishedIsoscalarTables(): PublishedTable[] {
  return Object.entries({
    "pdg-isoscalar-1-from-8x8.json": singlet,
    "pdg-isoscalar-8s-from-8x8.json": symmetricOctet,
    "pdg-isoscalar-8a-from-8x8.json": antisymmetricOctet,
    "pdg-isoscalar-10-from-8x8.json": decuplet,
    "pdg-isoscalar-8-from-10x8.json": octetOfDecuplet,
    "pdg-isoscalar-10-from-10x8.json": decupletOfDecuplet,
    "quark-model-1-from-3x3bar.json": quarkSinglet,
    "quark-model-8-from-3x3bar.json": quarkMesons,
    "quark-model-8-from-6x3.json": quarkOctet,
    "quark-model-10-from-6x3.json": quarkDecuplet,
    "couplet-isoscalar-10bar-from-8x8.json": antidecuplet,
    "couplet-isoscalar-27-from-8x8.json": twentySeven,
    "couplet-isoscalar-27-from-10x8.json": twentySevenOfDecuplet,
  }).map(([name, json]) => readPublishedTable(name, json));
}
