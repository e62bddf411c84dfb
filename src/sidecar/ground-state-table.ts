import { complete } from "../completion/complete.js";
import { minimaToTabulate } from "../completion/mirrors.js";
import { fitModel } from "../model/fit-model.js";
import { resolveStudy } from "../model/resolve-study.js";
import { readStudy } from "../study/read-study.js";
import { encodeDecays } from "../tables/encode-decays.js";
import { GROUND_STATE_STUDY } from "./ground-state-study.js";

/** The decay table of the built-in ground-state study, sealed as a file would be. */
export function groundStateTable(): Uint8Array {
  const fit = fitModel(resolveStudy(readStudy(Buffer.from(GROUND_STATE_STUDY), "ground-states.yaml")));
  return encodeDecays(complete(fit, minimaToTabulate(fit)[0]!));
}
