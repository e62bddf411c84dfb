import { couplet } from "../../gen/couplet.js";
import { refuse } from "../../require.js";
import { type Irrep, irrepName, isospinMultiplets, requireIrrep } from "../../su3/irrep.js";
import { isoscalarTable } from "../../su3/isoscalar-factors.js";
import { factorsMessage } from "../../tables/encode-factors.js";
import { digestOf, sealBytes } from "../../tables/sealed-bytes.js";
import { requireWithin, type SidecarLimits } from "../limits.js";
import { type Method, method, type Snapshot } from "./method.js";

import v1 = couplet.v1;

/** `GetIsoscalarFactors`: refused by an estimate before anything is computed. */
export const getIsoscalarFactors: Method = method(
  "GetIsoscalarFactors",
  false,
  v1.GetIsoscalarFactorsRequest,
  v1.GetIsoscalarFactorsResponse,
  ({ limits }: Snapshot, request) => {
    const left = requestedIrrep("left", request.left);
    const right = requestedIrrep("right", request.right);
    const into = request.into == null ? undefined : requestedIrrep("into", request.into);
    requireFew(left, right, limits);
    const table = factorsMessage(isoscalarTable(left, right, into === undefined ? {} : { into }), {
      states: false,
    });
    const sealed = sealBytes(v1.FactorTable.encode(table).finish());
    return { message: { tableSha256: Buffer.from(digestOf(sealed), "hex"), table } };
  },
);

function requestedIrrep(field: string, irrep: v1.Irrep.$Properties | null | undefined): Irrep {
  const where = `GetIsoscalarFactors: ${field}`;
  if (irrep?.p == null || irrep.q == null)
    refuse(where, "an irrep with p and q", irrep ?? null, "The octet is p = 1, q = 1.");
  requireIrrep(where, { p: irrep.p, q: irrep.q });
  return { p: irrep.p, q: irrep.q };
}

/** Every (Y,I) of the product with n channels has n states, so n^2 factors; `into` only makes it less. */
function requireFew(left: Irrep, right: Irrep, { factors }: SidecarLimits): void {
  const where = `GetIsoscalarFactors: ${irrepName(left)} x ${irrepName(right)}`;
  const mend = "Make the table as a file: `couplet factors ... --out FILE.pb`.";
  const pairs = (left.p + 1) * (left.q + 1) * (right.p + 1) * (right.q + 1);
  // There are at least as many factors as pairs of multiplets.
  requireWithin(where, factors, pairs, "factors", mend);
  const channels = new Map<string, number>();
  for (const a of isospinMultiplets(left)) {
    for (const b of isospinMultiplets(right)) {
      for (let twoI = Math.abs(a.twoI - b.twoI); twoI <= a.twoI + b.twoI; twoI += 2) {
        const block = `${a.threeY + b.threeY},${twoI}`;
        channels.set(block, (channels.get(block) ?? 0) + 1);
      }
    }
  }
  const count = [...channels.values()].reduce((sum, n) => sum + n * n, 0);
  requireWithin(where, factors, count, "factors", mend);
}
