import type { Study } from "../study/study.js";
import { decayHasFAndD } from "./evaluate.js";
import type { Decay, Observable, Parameter, PriorTarget } from "./model.js";
import type { Problems } from "./problems.js";
import { noteRepeated, type WrittenObservable } from "./repeated-measurements.js";

const RATIOS = ["D", "F", "F/D", "alpha_F", "alpha_D"] as const;

/** Priors of a study as observables; what they are on must exist. */
export function resolvePriors(
  study: Study,
  decays: readonly Decay[],
  parameters: readonly Parameter[],
  problems: Problems,
): Observable[] {
  const targets = targetsOf(decays, parameters);
  const written = study.priors.flatMap(({ path, parameter, value, source }): WrittenObservable[] => {
    const target = targets.get(parameter);
    if (target === undefined) {
      problems.add(
        `${path}/parameter`,
        `expected one of ${[...targets.keys()].join(", ")}, got ${JSON.stringify(parameter)}.`,
      );
      return [];
    }
    if (value.plus === 0) {
      problems.add(`${path}/value`, "expected an error. Write `value +- error`.");
      return [];
    }
    const position = problems.positionOf(path);
    const observable: Observable = {
      label: `prior ${parameter}`,
      quantum: { kind: "parameter", parameter: target },
      measured: value,
      signOnly: false,
      source,
      use: "fit",
      position,
    };
    return [{ path, observable }];
  });
  noteRepeated(written, problems);
  return written.map(({ observable }) => observable);
}

function targetsOf(decays: readonly Decay[], parameters: readonly Parameter[]): Map<string, PriorTarget> {
  const targets = new Map<string, PriorTarget>();
  for (const [index, { name, kind }] of parameters.entries()) {
    if (kind === "coupling" || kind === "mixing angle") targets.set(name, { parameter: index });
  }
  for (const [decay, resolved] of decays.entries()) {
    if (!decayHasFAndD(resolved)) continue;
    for (const name of RATIOS)
      targets.set(resolved.name === "" ? name : `${resolved.name}.${name}`, { decay, name });
  }
  return targets;
}
