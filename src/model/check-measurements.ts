import { canonicalName, catalogueParticles } from "../hadrons/catalogue.js";
import { catalogueMultiplet, catalogueMultipletIds } from "../hadrons/catalogue-multiplet.js";
import type { Study, StudyMeasurement } from "../study/study.js";
import type { Problems } from "./problems.js";
import { requireError } from "./resolve-measurements.js";
import { addUnknownHadron, writtenChannel } from "./width-sums.js";

/**
 * Notes what is wrong with measurements by themselves: a missing error, a text that is no channel, a hadron that is
 * neither of the catalogue nor in the study.
 *
 * For a study whose decays have problems, so that both are reported at once.
 */
export function checkMeasurements(study: Study, problems: Problems): void {
  const known = knownNames(study);
  for (const measurement of study.measurements) {
    requireError(measurement, problems);
    for (const [name, path] of namesIn(measurement, problems)) {
      const memberName = name.replace(/([+-]+|0)(bar)?$/, "");
      if ([name, canonicalName(name), memberName].some((spelling) => known.has(spelling))) continue;
      addUnknownHadron(name, path, [...known], problems);
    }
  }
}

function knownNames({ hadronNames }: Study): Set<string> {
  const members = catalogueMultipletIds().flatMap((id) => catalogueMultiplet(id).members);
  const particles = catalogueParticles().map(({ name }) => name);
  return new Set([...hadronNames, ...members.map(({ name }) => name), ...particles]);
}

/** Names of hadrons in a measurement, with the path where each stands. */
function namesIn({ path, kind, channels }: StudyMeasurement, problems: Problems): [string, string][] {
  if (kind === "axial") return [];
  return channels.flatMap((text, k): [string, string][] => {
    const at = channels.length === 1 ? `${path}/${kind}` : `${path}/${kind}/${k}`;
    if (kind === "total") return [[text, at]];
    const written = writtenChannel(text, at, problems);
    return written === undefined ? [] : [written.parent, ...written.daughters].map((name) => [name, at]);
  });
}
