// The declarations, as a strict user compiles them.
import {
  complete,
  type DecayChannel,
  decodeDecays,
  encodeDecays,
  type Fit,
  fitModel,
  type Irrep,
  isoscalarFactor,
  readStudy,
  resolveStudy,
  rootToNumber,
  type SignedRoot,
  type Tables,
  type WidthModel,
  widthModel,
} from "couplet";

const octet: Irrep = { p: 1, q: 1 };
const root: SignedRoot = isoscalarFactor(
  octet,
  octet,
  octet,
  1,
  { threeY: 0, twoI: 0 },
  {
    threeY1: 3,
    twoI1: 1,
    threeY2: -3,
    twoI2: 1,
  },
);
export const value: number = rootToNumber(root);
export const model: WidthModel = widthModel("a", { n: 1 });

export function tablesOf(bytes: Uint8Array): number {
  const fit: Fit = fitModel(resolveStudy(readStudy(bytes, "study.yaml")));
  const channels: readonly DecayChannel[] = fit.model.channels;
  const tables: Tables = complete(fit, 0);
  const read = decodeDecays(encodeDecays(tables), "study.decays.pb");
  return channels.length + (read.header?.schemaMinor ?? 0);
}
