import { complete } from "../completion/complete.js";
import { minimaToTabulate } from "../completion/mirrors.js";
import { couplingTable } from "../completion/tabulate-couplings.js";
import { fitModel } from "../model/fit-model.js";
import { resolveStudy } from "../model/resolve-study.js";
import { readStudy } from "../study/read-study.js";
import { encodeCouplings } from "../tables/encode-couplings.js";
import { encodeDecays } from "../tables/encode-decays.js";
import { GROUND_STATE_STUDY } from "./ground-state-study.js";

/** The decay and the coupling table of the built-in ground-state study, sealed as files would be. */
export function groundStateTables(): [decays: Uint8Array, couplings: Uint8Array] {
  const fit = fitModel(resolveStudy(readStudy(Buffer.from(GROUND_STATE_STUDY), "ground-states.yaml")));
  const minimum = minimaToTabulate(fit)[0]!;
  return [encodeDecays(complete(fit, minimum)), encodeCouplings(couplingTable(fit, minimum))];
}
