import { canonicalName } from "../hadrons/catalogue.js";
import type { Hadron } from "../hadrons/hadron.js";
import type { Multiplet } from "../hadrons/multiplet.js";
import { nearestNames } from "../hadrons/nearest-names.js";
import type { Study, StudyMeasurement } from "../study/study.js";
import { parseChannel } from "./channel-names.js";
import type { Channel, Denominator, Observable, Parameter, Parent, WidthSum } from "./model.js";
import type { Problems } from "./problems.js";

/** What measurements are resolved against. */
export interface Resolved {
  readonly channels: readonly Channel[];
  readonly parents: readonly Parent[];
  readonly multiplets: readonly Multiplet[];
  readonly couplings: readonly Parameter[];
}

/** Observables of a study and the total widths that become parameters because a fraction is fitted. */
export interface Measurements {
  readonly observables: readonly Observable[];
  readonly totals: readonly Parameter[];
}

/** Ties every measurement to the channels it is about; what cannot be tied is noted. */
export function resolveMeasurements(study: Study, resolved: Resolved, problems: Problems): Measurements {
  const totals: Parameter[] = [];
  const observables = study.measurements.map((measurement, k) =>
    resolveMeasurement(measurement, `measurements/${k}`, resolved, totals, problems),
  );
  return { observables: observables.filter((observable) => observable !== undefined), totals };
}

function resolveMeasurement(
  measurement: StudyMeasurement,
  path: string,
  resolved: Resolved,
  totals: Parameter[],
  problems: Problems,
): Observable | undefined {
  const { kind, channels, value, source, use } = measurement;
  const paths = kind === "ratio" ? [`${path}/ratio/0`, `${path}/ratio/1`] : [`${path}/${kind}`];
  const sums = channels.map((text, k) => widthSumOf(text, paths[k]!, resolved, problems));
  if (use !== "table" && value.plus === 0) {
    problems.add(
      `${path}/value`,
      "expected an error, since the value enters the fit. Write `value +- error`, or give it `use: table`.",
    );
    return undefined;
  }
  const [numerator, other] = sums;
  if (numerator === undefined || (kind === "ratio" && other === undefined)) return undefined;
  const label = `${kind} ${channels.join(" / ")}`;
  const common = {
    label,
    kind,
    measured: value,
    source,
    use,
    numerator,
    position: problems.positionOf(path),
  };
  if (kind === "width") return { ...common, denominator: { kind: "one" } };
  if (kind === "ratio") return { ...common, denominator: { kind: "sum", sum: other! } };
  const denominator = totalWidthOf(numerator, use !== "table", resolved, totals);
  return { ...common, denominator };
}

/**
 * The sum of widths a written channel means. Names of isospin multiplets stand for all their charge states: daughters
 * are summed over, and the parents that can decay so are averaged.
 */
function widthSumOf(
  text: string,
  path: string,
  resolved: Resolved,
  problems: Problems,
): WidthSum | undefined {
  const written = parseChannel(text);
  if (written === undefined) {
    problems.add(path, `expected a channel such as \`N(1675) -> N pi\`, got ${JSON.stringify(text)}.`);
    return undefined;
  }
  const names = [written.parent, ...written.daughters];
  const sets = names.map((name) => hadronsNamed(name, resolved.multiplets));
  for (const [k, set] of sets.entries()) {
    if (set.size > 0) continue;
    const known = resolved.multiplets.flatMap(({ members }) =>
      members.flatMap(({ name, hadrons }) => [name, ...hadrons.map((h) => h.name)]),
    );
    const near = nearestNames(names[k]!, [...new Set(known)]).join(", ");
    problems.add(
      path,
      `expected a hadron of this study, got ${JSON.stringify(names[k])}.${near === "" ? "" : ` Did you mean ${near}?`}`,
    );
    return undefined;
  }
  const [parents, first, second] = sets as [Set<string>, Set<string>, Set<string>];
  const matching = resolved.channels
    .map((channel, index) => ({ channel, index }))
    .filter(({ channel }) => parents.has(channel.parent.name) && matches(channel.daughters, first, second));
  if (matching.length === 0) {
    const there = [
      ...new Set(
        resolved.channels.filter(({ parent }) => parents.has(parent.name)).map((c) => c.isospinChannel),
      ),
    ];
    problems.add(
      path,
      there.length === 0
        ? `expected a parent that decays in this study, got ${JSON.stringify(written.parent)}.`
        : `expected a channel of this study that conserves charge, isospin and strangeness, got ${JSON.stringify(text)}. There are: ${there.join("; ")}.`,
    );
    return undefined;
  }
  const weight = 1 / new Set(matching.map(({ channel }) => channel.parent.name)).size;
  return matching.map(({ index }) => ({ channel: index, weight }));
}

function matches([a, b]: readonly [Hadron, Hadron], first: Set<string>, second: Set<string>): boolean {
  return (first.has(a.name) && second.has(b.name)) || (first.has(b.name) && second.has(a.name));
}

/** Names of the charge states a name stands for: one, or all of an isospin multiplet. */
function hadronsNamed(name: string, multiplets: readonly Multiplet[]): Set<string> {
  const canonical = canonicalName(name);
  const names = new Set<string>();
  for (const member of multiplets.flatMap(({ members }) => members)) {
    const wholeMember = member.name === name || member.name === canonical;
    for (const hadron of member.hadrons) {
      if (wholeMember || hadron.name === name || hadron.name === canonical) names.add(hadron.name);
    }
  }
  return names;
}

/**
 * What a fraction's numerator is divided by: the mean total width of the parents. A total width with an error that
 * enters the fit becomes a parameter with that width as its prior, once for each set of parents.
 */
function totalWidthOf(
  numerator: WidthSum,
  fitted: boolean,
  resolved: Resolved,
  totals: Parameter[],
): Denominator {
  const names = [...new Set(numerator.map(({ channel }) => resolved.channels[channel]!.parent.name))];
  const parents = names.map((name) => resolved.parents.find(({ hadron }) => hadron.name === name)!);
  if (parents.some(({ total }) => total.kind === "sum")) {
    const sum = parents.flatMap(({ channels }) =>
      channels.map((channel) => ({ channel, weight: 1 / parents.length })),
    );
    return { kind: "sum", sum };
  }
  const mean = (of: (parent: Parent) => number) =>
    parents.reduce((sum, parent) => sum + of(parent), 0) / parents.length;
  const value = mean(({ total }) => total.widthMeV);
  const plus = mean(({ total }) => total.plusMeV);
  const minus = mean(({ total }) => total.minusMeV);
  if (!fitted || plus === 0 || minus === 0) return { kind: "fixed", widthMeV: value };
  const name = `total width ${names.join(", ")}`;
  let position = totals.findIndex((parameter) => parameter.name === name);
  if (position < 0) {
    position =
      totals.push({ name, kind: "total width", unit: "MeV", start: value, prior: { value, plus, minus } }) -
      1;
  }
  return { kind: "parameter", index: resolved.couplings.length + position };
}
