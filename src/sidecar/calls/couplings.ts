import { couplet } from "../../gen/couplet.js";
import { refuse } from "../../require.js";
import { familiesOf, familyName, isOfFamily } from "../families.js";
import type { ServedCouplings } from "../served.js";
import { type Method, method, type Snapshot } from "./method.js";

import v1 = couplet.v1;

/** `GetCouplings`: the couplings of one vertex family. */
export const getCouplings: Method = method(
  "GetCouplings",
  false,
  v1.GetCouplingsRequest,
  v1.GetCouplingsResponse,
  ({ served }: Snapshot, request) => {
    const tables = served.couplingTables(request.tableSha256);
    const { table, family } = found(tables, request.family);
    const { header, matrixConvention, reduced, isospin, charged, isospinLagrangians } = table.message;
    return {
      message: {
        tableSha256: table.sha256,
        convention: header.convention,
        matrixConvention,
        reduced: reduced.filter((coupling) => familyName(coupling) === familyName(family)),
        isospin: isospin.filter((coupling) => isOfFamily(coupling, family)),
        charged: charged.filter((coupling) => isOfFamily(coupling, family)),
        isospinLagrangians: isospinLagrangians.filter((one) => familyName(one) === familyName(family)),
      },
    };
  },
);

function found(
  tables: readonly ServedCouplings[],
  wanted: v1.VertexFamily.$Properties | null | undefined,
): { table: ServedCouplings; family: v1.VertexFamily.$Properties } {
  const all = tables.flatMap((table) => familiesOf(table.message).map((family) => ({ table, family })));
  const matching = all.filter(
    ({ family }) =>
      family.from === wanted?.from &&
      (family.to ?? []).join() === (wanted?.to ?? []).join() &&
      (wanted?.twoL == null || wanted.twoL === family.twoL) &&
      (wanted?.twoS == null || wanted.twoS === family.twoS),
  );
  if (matching.length === 1) return matching[0]!;
  const got = wanted == null ? null : familyName(wanted);
  const choices = (matching.length > 1 ? matching : all).map(({ family }) => familyName(family)).join("; ");
  refuse(
    "family",
    matching.length > 1 ? "one vertex family of one table" : "a vertex family of the coupling tables served",
    got,
    choices === "" ? "No coupling table is served: give `couplet serve` one." : `There are: ${choices}.`,
  );
}
