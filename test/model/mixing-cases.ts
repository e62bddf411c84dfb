import { Evaluation, evaluator } from "../../src/model/evaluate.js";
import { fittedObservables } from "../../src/model/fit-model.js";
import type { Model } from "../../src/model/model.js";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { readStudy } from "../../src/study/read-study.js";

/** The model of a study's text. */
export const resolved = (text: string): Model => resolveStudy(readStudy(Buffer.from(text), "study.yaml"));

/**
 * A study of mixing with what is planted in it: the measurements are computed from the planted couplings and angles, and the
 * fit must find the planted physics again. All states, masses, widths and couplings are invented.
 */
export interface Case {
  readonly name: string;
  /** Multiplets, mixing and decays. */
  readonly study: string;
  /** Couplings and angles in radians, by the names of the fit's parameters. */
  readonly truth: Readonly<Record<string, number>>;
  /** What is measured: widths, and amplitudes with the sign + of their reaction. */
  readonly measured: readonly string[];
}

const line = (what: string, value: number, error: number) =>
  what.startsWith("amplitude")
    ? `  - { ${what}, value: ${value} +- ${error}, sign: "+", source: invented }\n`
    : `  - { ${what}, value: ${value} +- ${error} MeV, source: invented }\n`;

/** The parameters of a model with the planted ones in place. */
export function vectorOf(model: Model, truth: Case["truth"]): number[] {
  return model.parameters.map(({ name, start }) => truth[name] ?? start);
}

/** The study with measurements computed from the planted parameters, their errors 2 %. */
export function planted({ study, truth, measured }: Case): string {
  const head = `couplet: 1\ntitle: Planted mixing, every number invented\n${study}measurements:\n`;
  const model = resolved(head + measured.map((what) => line(what, 0.5, 1)).join(""));
  const unknown = Object.keys(truth).filter((name) => !model.parameters.some((p) => p.name === name));
  if (unknown.length > 0) throw new Error(`no parameter ${unknown.join(", ")}`);
  const evaluation = new Evaluation(evaluator(model), vectorOf(model, truth));
  const values = fittedObservables(model).map((observable) => evaluation.observable(observable).value);
  return head + measured.map((what, k) => line(what, values[k]!, Math.abs(values[k]!) / 50)).join("");
}

const member = (name: string, place: string, mass: number) =>
  `      - { name: ${name}, place: ${place}, mass: ${mass} MeV, width: 100 MeV }\n`;
const octet = (id: string, members: string, spinParity = "3/2-", irrep = "8") =>
  `  ${id}:\n    irrep: ${irrep}\n    spinParity: ${spinParity}\n${members === "" ? "" : `    members:\n${members}`}`;
const mix = (bare: string[], states: [string, number][], angle: string) =>
  `  - bare: [${bare.join(", ")}]\n    states: [${states.map(([name, mass]) => `{ name: ${name}, mass: ${mass} MeV, width: 100 MeV }`).join(", ")}]\n    ${angle}\n`;
const decay = (from: string, meson = "pseudoscalar-octet", L = 2) =>
  `  - { name: ${from}, from: ${from}, to: [baryon-octet, ${meson}], L: ${L}, model: a }\n`;
const widths = (parent: string, ...channels: string[]) =>
  channels.map((channel) => `width: ${parent} -> ${channel}`);
const amplitude = (parent: string, entrance: string, exit: string) =>
  `amplitude: [${parent} -> ${entrance}, ${parent} -> ${exit}]`;

export const SINGLET: Case = {
  name: "Lambda of an octet and a singlet",
  study: `multiplets:
${octet("o", member("N(1705)", "N", 1700) + member("Sigma(1800)", "Sigma", 1800))}${octet("s", "", "3/2-", "1")}mixing:
${mix(
  ["o/Lambda", "s/Lambda"],
  [
    ["Lambda(1850)", 1850],
    ["Lambda(1650)", 1650],
  ],
  "angle: free",
)}decays:
${decay("o")}${decay("s")}`,
  truth: { "o.g(8_1)": 2, "o.g(8_2)": 1.1, "s.g(1)": 1.7, "angle(Lambda(1850), Lambda(1650))": 0.4 },
  measured: [
    ...widths("N(1705)", "N pi"),
    ...widths("Sigma(1800)", "N Kbar", "Lambda pi"),
    ...widths("Lambda(1850)", "N Kbar", "Sigma pi"),
    ...widths("Lambda(1650)", "N Kbar", "Sigma pi"),
    amplitude("Lambda(1850)", "N Kbar", "Sigma pi"),
    amplitude("Lambda(1650)", "N Kbar", "Sigma pi"),
  ],
};

export const DECUPLET: Case = {
  name: "Sigma of an octet and a decuplet",
  study: `multiplets:
${octet("o", member("N(1705)", "N", 1700) + member("Lambda(1850)", "Lambda", 1850))}${octet("d", member("Delta(1705)", "Delta", 1700), "3/2-", "10")}mixing:
${mix(
  ["o/Sigma", "d/Sigma"],
  [
    ["Sigma(1755)", 1750],
    ["Sigma(1900)", 1900],
  ],
  "angle: free",
)}decays:
${decay("o")}${decay("d")}`,
  truth: { "o.g(8_1)": 2, "o.g(8_2)": 1.1, "d.g(10)": 1.6, "angle(Sigma(1755), Sigma(1900))": -0.5 },
  measured: [
    ...widths("N(1705)", "N pi"),
    ...widths("Lambda(1850)", "N Kbar"),
    ...widths("Delta(1705)", "N pi"),
    ...widths("Sigma(1755)", "N Kbar", "Lambda pi", "Sigma pi"),
    ...widths("Sigma(1900)", "N Kbar", "Lambda pi", "Sigma pi"),
    amplitude("Sigma(1755)", "N Kbar", "Lambda pi"),
    amplitude("Sigma(1900)", "N Kbar", "Sigma pi"),
  ],
};

/** The Xi follow the Sigma, with nothing measured of them: sin 2t' = 150/170 sin 2t. */
export const TIED: Case = {
  ...DECUPLET,
  name: "Sigma of an octet and a decuplet, and the Xi tied to them",
  study: DECUPLET.study.replace(
    "decays:",
    mix(
      ["o/Xi", "d/Xi"],
      [
        ["Xi(1950)", 1950],
        ["Xi(2120)", 2120],
      ],
      'angle: "tied to Sigma(1900)"',
    ) + "decays:",
  ),
};

export const ANTIDECUPLET: Case = {
  name: "N of an octet and an antidecuplet",
  study: `multiplets:
${octet("o", member("Sigma(1800)", "Sigma", 1800) + member("Lambda(1850)", "Lambda", 1850), "1/2+")}${octet("a", member("Theta(1700)", "Theta", 1700), "1/2+", "10bar")}mixing:
${mix(
  ["o/N", "a/N"],
  [
    ["N(1655)", 1650],
    ["N(1800)", 1800],
  ],
  "angle: free",
)}decays:
${decay("o", undefined, 1)}${decay("a", undefined, 1)}`,
  truth: { "o.g(8_1)": 2, "o.g(8_2)": 1.1, "a.g(10bar)": 0.9, "angle(N(1655), N(1800))": 0.3 },
  measured: [
    ...widths("Theta(1700)", "N K"),
    ...widths("Sigma(1800)", "Lambda pi", "Sigma pi", "N Kbar"),
    ...widths("N(1655)", "N pi", "N eta"),
    ...widths("N(1800)", "N pi", "N eta", "Lambda K"),
    amplitude("N(1655)", "N pi", "N eta"),
    amplitude("N(1800)", "N pi", "N eta"),
  ],
};

export const TWENTY_SEVEN: Case = {
  name: "Lambda of an octet and a 27",
  study: `multiplets:
${octet("o", member("N(1705)", "N", 1700) + member("Sigma(1800)", "Sigma", 1800))}${octet("t", member("S(1750)", "Y=0 I=2", 1750), "3/2-", "27")}mixing:
${mix(
  ["o/Lambda", "t/Lambda"],
  [
    ["Lambda(1750)", 1750],
    ["Lambda(1900)", 1900],
  ],
  "angle: free",
)}decays:
${decay("o")}${decay("t")}`,
  truth: { "o.g(8_1)": 2, "o.g(8_2)": 1.1, "t.g(27)": 1.4, "angle(Lambda(1750), Lambda(1900))": 0.6 },
  measured: [
    ...widths("N(1705)", "N pi"),
    ...widths("Sigma(1800)", "N Kbar", "Lambda pi"),
    ...widths("S(1750)", "Sigma pi"),
    ...widths("Lambda(1750)", "N Kbar", "Sigma pi"),
    ...widths("Lambda(1900)", "N Kbar", "Sigma pi", "Lambda eta"),
    amplitude("Lambda(1750)", "N Kbar", "Sigma pi"),
    amplitude("Lambda(1900)", "N Kbar", "Lambda eta"),
  ],
};

export const TWO_OCTETS: Case = {
  name: "N of two octets",
  study: `multiplets:
${octet("o", member("Sigma(1700)", "Sigma", 1700))}${octet("u", member("Sigma(1850)", "Sigma", 1850))}mixing:
${mix(
  ["o/N", "u/N"],
  [
    ["N(1600)", 1600],
    ["N(1750)", 1750],
  ],
  "angle: free",
)}decays:
${decay("o")}${decay("u")}`,
  truth: {
    "o.g(8_1)": 2,
    "o.g(8_2)": 1.1,
    "u.g(8_1)": -0.7,
    "u.g(8_2)": 1.6,
    "angle(N(1600), N(1750))": 0.5,
  },
  measured: [
    ...widths("Sigma(1700)", "N Kbar", "Lambda pi", "Sigma pi"),
    ...widths("Sigma(1850)", "N Kbar", "Lambda pi", "Sigma pi"),
    amplitude("Sigma(1700)", "N Kbar", "Lambda pi"),
    amplitude("Sigma(1850)", "N Kbar", "Lambda pi"),
    ...widths("N(1600)", "N pi", "N eta"),
    ...widths("N(1750)", "N pi", "N eta"),
    amplitude("N(1600)", "N pi", "N eta"),
    amplitude("N(1750)", "N pi", "N eta"),
  ],
};

export const THREE: Case = {
  name: "three Lambdas of an octet, a 27 and a singlet, angles known to 0.1 rad",
  study: `multiplets:
${octet("o", member("Sigma(1700)", "Sigma", 1700))}${octet("t", member("S(1750)", "Y=0 I=2", 1750), "3/2-", "27")}${octet("s", "", "3/2-", "1")}mixing:
${mix(
  ["o/Lambda", "t/Lambda", "s/Lambda"],
  [
    ["Lambda(1650)", 1650],
    ["Lambda(1750)", 1750],
    ["Lambda(1900)", 1900],
  ],
  "angles: [0.3 +- 0.1 rad, -0.2 +- 0.1 rad, 0.4 +- 0.1 rad]",
)}decays:
${decay("o")}${decay("t")}${decay("s")}`,
  truth: {
    "o.g(8_1)": 2,
    "o.g(8_2)": 1.1,
    "t.g(27)": 1.4,
    "s.g(1)": 1.3,
    // The priors' centres, so that the planted point has chi2 0.
    "angle(Lambda(1650), Lambda(1750), Lambda(1900); 1,2)": 0.3,
    "angle(Lambda(1650), Lambda(1750), Lambda(1900); 1,3)": -0.2,
    "angle(Lambda(1650), Lambda(1750), Lambda(1900); 2,3)": 0.4,
  },
  measured: [
    ...widths("Sigma(1700)", "N Kbar", "Lambda pi", "Sigma pi"),
    amplitude("Sigma(1700)", "N Kbar", "Lambda pi"),
    ...widths("S(1750)", "Sigma pi"),
    ...["Lambda(1650)", "Lambda(1750)", "Lambda(1900)"].flatMap((name) => [
      ...widths(name, "N Kbar", "Sigma pi"),
      amplitude(name, "N Kbar", "Sigma pi"),
    ]),
  ],
};

export const ETA: Case = {
  name: "eta and eta' as daughters",
  study: `multiplets:
${octet("o", member("N(2200)", "N", 2200) + member("Lambda(2300)", "Lambda", 2300))}mixing:
  - { bare: [pseudoscalar-octet/eta, pseudoscalar-singlet/eta], states: [{ name: eta }, { name: eta'(958) }], convention: meson, angle: free }
decays:
${decay("o")}  - { name: e, from: o, to: [baryon-octet, pseudoscalar-singlet], L: 2, model: a }
`,
  truth: { "o.g(8_1)": 1.2, "o.g(8_2)": 0.6, "e.g(8)": 0.5, "angle(eta, eta'(958))": -0.25 },
  measured: [
    ...widths("N(2200)", "N pi", "N eta", "N eta'(958)", "Lambda K"),
    ...widths("Lambda(2300)", "N Kbar", "Sigma pi", "Lambda eta", "Lambda eta'(958)"),
    amplitude("Lambda(2300)", "N Kbar", "Lambda eta"),
    amplitude("Lambda(2300)", "N Kbar", "Lambda eta'(958)"),
    amplitude("N(2200)", "N pi", "N eta"),
  ],
};

const mesons = (
  id: string,
  octetId: string,
  singletId: string,
  spinParity: string,
  names: string[],
  L: number,
) => `multiplets:
  ${octetId}:
    irrep: 8
    spinParity: ${spinParity}
    members:
${member(names[0]!, "pi", 1300)}${member(names[1]!, "K", 1400)}  ${singletId}: { irrep: 1, spinParity: ${spinParity} }
mixing:
${mix(
  [`${octetId}/eta`, `${singletId}/eta`],
  [
    [names[2]!, 1500],
    [names[3]!, 1250],
  ],
  "convention: meson\n    angle: free",
)}decays:
  - { name: ${id}, from: ${octetId}, to: [pseudoscalar-octet, pseudoscalar-octet], L: ${L}, model: a }
`;

export const TENSORS: Case = {
  name: "f2 and f2' as parents",
  study: `${mesons("t", "tens", "tens1", "2++", ["a(1300)", "K(1400)", "F(1500)", "f(1250)"], 2)}  - { name: u, from: tens1, to: [pseudoscalar-octet, pseudoscalar-octet], L: 2, model: a }
`,
  truth: { "t.g(8_1)": 2, "u.g(1)": 2.4, "angle(F(1500), f(1250))": 0.5 },
  measured: [
    ...widths("a(1300)", "K Kbar", "pi eta"),
    ...widths("K(1400)", "K pi"),
    ...widths("F(1500)", "K Kbar", "pi pi"),
    ...widths("f(1250)", "K Kbar", "pi pi"),
    amplitude("f(1250)", "K Kbar", "pi pi"),
  ],
};

export const VECTORS: Case = {
  name: "omega and phi as parents, of which the octet alone decays",
  study: mesons("v", "vec", "vec1", "1--", ["r(1300)", "K(1400)", "P(1500)", "w(1250)"], 1),
  truth: { "v.g(8_2)": 2, "angle(P(1500), w(1250))": 0.6 },
  measured: [
    ...widths("r(1300)", "pi pi"),
    ...widths("K(1400)", "K pi"),
    ...widths("P(1500)", "K Kbar"),
    ...widths("w(1250)", "K Kbar"),
  ],
};

export const CASES = [
  SINGLET,
  DECUPLET,
  TIED,
  ANTIDECUPLET,
  TWENTY_SEVEN,
  TWO_OCTETS,
  THREE,
  ETA,
  TENSORS,
  VECTORS,
];
