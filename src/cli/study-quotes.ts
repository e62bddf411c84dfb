import { CoupletError } from "../errors.js";
import { measurementLabel } from "../model/resolve-measurements.js";
import { draftStudy } from "../study/read-study.js";
import type { Study, StudyMember } from "../study/study.js";

/** A line of a study file. */
export interface Quote {
  /** From 1. */
  readonly line: number;
  readonly text: string;
}

/** Where the values of a table stand in the study that its header keeps. */
export interface StudyQuotes {
  /** The measurement of a label, as every table prints it, and a source. */
  measurement(label: string, source: string): Quote | undefined;
  /** The total width of a charge state of a multiplet; undefined where the study leaves it to the catalogue. */
  width(multiplet: string, hadron: string): Quote | undefined;
}

/** The quotes of a study's text; all undefined where this version cannot read it. */
export function studyQuotes(text: string): StudyQuotes {
  const study = studyOf(text);
  const lines = text.split(/\r?\n/);
  const quote = (path: string): Quote | undefined => {
    const line = study?.positions.get(path)?.line;
    return line === undefined ? undefined : { line, text: (lines[line - 1] ?? "").trim() };
  };
  return {
    measurement(label, source) {
      const found = study?.measurements.find((m) => measurementLabel(m) === label && m.source === source);
      return found && quote(found.path);
    },
    width(multiplet, hadron) {
      const places = study === undefined ? [] : memberPlaces(study, multiplet);
      const found = places
        .filter(({ member }) => hadron.startsWith(member.name))
        .sort((a, b) => b.member.name.length - a.member.name.length)[0];
      if (found === undefined) return undefined;
      const own = `${found.path}/chargeStates/${hadron}/width`;
      return quote(own) ?? quote(`${found.path}/width`);
    },
  };
}

/** Members of a multiplet and mixed states, with the paths they stand at. */
function memberPlaces(
  { multiplets, mixing }: Study,
  multiplet: string,
): { member: Omit<StudyMember, "place">; path: string }[] {
  const members = multiplets[multiplet]?.members ?? [];
  return [
    ...members.map((member, k) => ({ member, path: `multiplets/${multiplet}/members/${k}` })),
    ...mixing.flatMap(({ states, path }) =>
      states.map((member, k) => ({ member, path: `${path}/states/${k}` })),
    ),
  ];
}

function studyOf(text: string): Study | undefined {
  try {
    return draftStudy(Buffer.from(text), "the study in the header").study;
  } catch (error) {
    // A study of another version than ours: the ledger does without the lines.
    if (error instanceof CoupletError) return undefined;
    throw error;
  }
}
