import { describe, expect, test } from "vitest";
import { describeUncertainties } from "../../src/cli/describe-uncertainty.js";
import { describeFit, fitJson } from "../../src/cli/fit.js";
import { describeParent } from "../../src/cli/show.js";
import { complete } from "../../src/completion/complete.js";
import type { Flag } from "../../src/completion/tables.js";
import { couplingTable } from "../../src/completion/tabulate-couplings.js";
import { whyNoPlainMember } from "../../src/hadrons/no-plain-members.js";
import { validityWarnings } from "../../src/model/validity.js";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { couplingsMessage } from "../../src/tables/encode-couplings.js";
import { decaysMessage, encodeDecays } from "../../src/tables/encode-decays.js";
import { modelSpread } from "../../src/uncertainty/model-spread.js";
import { BASE, plantedStudy, widthMeV } from "../chain/planted-octet.js";
import { fitOf, studyText, tablesOf, withMeasurements } from "../chain/run.js";

// Every study here is invented, but for those of test/chain/studies.
const warnings = (text: string, minimum = 0) => validityWarnings(fitOf(text), minimum);
const texts = (text: string) => warnings(text).map((warning) => warning.text);

/** Two baryons that decay into the ground states, with what a case needs. */
const study = ({
  members = "{ name: N(1705), place: N, mass: 1700 MeV, width: 150 MeV }",
  spinParity = "5/2-",
  L = 2,
  more = "",
  measurements = "{ width: N(1705) -> N pi, value: 60 +- 6 MeV, source: invented }",
  to = "baryon-octet, pseudoscalar-octet",
  mixing = "",
  masses = "charge",
  irrep = "10bar",
}) => `couplet: 1
title: A limit of validity
multiplets:
  x: { irrep: ${irrep}, spinParity: ${spinParity}, members: [${members}] }
${mixing}decays:
  - { from: x, to: [${to}], L: ${L}, model: a, masses: ${masses} }
${more}measurements: [${measurements}]
`;

const MISSING_10BAR =
  "x, irrep 10bar, has no member for Theta, Sigma, Y=-1 I=3/2: one wrong assignment moves the couplings by more than their errors, and no mass relation can tell. Try `couplet fit --leave-one-out`.";
const MISSING_XI =
  "octet, irrep 8, has no member for Xi: one wrong assignment moves the couplings by more than their errors, and no mass relation can tell. Try `couplet fit --leave-one-out`.";

const AVERAGES =
  "`masses: average` is used for channels of less than 100 MeV of momentum, where only the masses of charge states will do: Lambda(1830) -> Xi K.";

describe("warnings of a study as a whole", () => {
  test("a missing member is named by its place", () => {
    expect(warnings(studyText("octet-5-2")).filter(({ parents }) => parents.length === 0)).toEqual([
      { parents: [], text: MISSING_XI },
      { parents: [], text: AVERAGES },
    ]);
    expect(texts(study({}))).toContain(MISSING_10BAR);
    // Mixed states fill places too, and so does the antiparticle of a meson.
    for (const whole of ["octet-3-2", "tensor-nonet", "vector-nonet"])
      expect(texts(studyText(whole)).filter((text) => text.includes("has no member"))).toEqual([]);
  });

  test("chi2 above 5 for each degree of freedom", () => {
    const contradicting = [
      ...BASE,
      `  - { width: Sigma(1800) -> N Kbar, value: ${6 * widthMeV("Sigma", "N Kbar")} +- 0.5 MeV, source: invented }`,
      `  - { width: Sigma(1800) -> Sigma pi, value: ${2 * widthMeV("Sigma", "Sigma pi")} +- 0.5 MeV, source: invented }`,
    ];
    const fit = fitOf(plantedStudy(contradicting));
    const { chi2, ndf } = fit.minima[0]!;
    expect(chi2 / ndf).toBeGreaterThan(5);
    expect(validityWarnings(fit, 0)[0]).toEqual({
      parents: [],
      text: `chi2 is ${chi2.toFixed(1)} with 3 degrees of freedom, ${(chi2 / 3).toFixed(1)} for each: errors that are not scaled mean little. See which pulls are large, or let breaking into the fit (\`fit: { theoryError: 0.2 }\`).`,
    });
    expect(texts(plantedStudy(BASE)).filter((text) => text.startsWith("chi2"))).toEqual([]);
  });

  test("a solution that the data do not exclude, and alpha from a single ratio", () => {
    // |1 - 2 alpha| = 0.4 leaves 0.3 and 0.7.
    const text = plantedStudy([
      BASE[0]!,
      `  - { width: Sigma(1800) -> N Kbar, value: ${widthMeV("Sigma", "N Kbar")} +- 0.5 MeV, source: invented }`,
    ]);
    const fit = fitOf(text);
    const [first, second] = fit.minima.map(
      ({ parameters }) => `alpha_F ${parameters.find(({ name }) => name === "alpha_F")!.value.toFixed(3)}`,
    ) as [string, string];
    expect([first, second].sort()).toEqual(["alpha_F 0.300", "alpha_F 0.700"]);
    const said = (used: string, other: string) =>
      `the data do not choose between this solution (${used}) and 1 more with chi2 closer than 4: ${other} at chi2 + 0.00. Add another channel, or a sign.`;
    expect(validityWarnings(fit, 0)[0]!.text).toBe(said(first, second));
    expect(validityWarnings(fit, 1)[0]!.text).toBe(said(second, first));
    expect(validityWarnings(fit, 0)[1]!.text).toBe(
      "alpha_F rests on a single ratio, of N(1705) -> N pi and Sigma(1800) -> N Kbar: every such ratio has two solutions, and one wrong measurement moves alpha_F as far as it likes.",
    );
    const three = texts(plantedStudy(BASE));
    expect(three.filter((text) => /single ratio|do not choose/.test(text))).toEqual([]);
  });

  test("ranges, which are no standard deviations", () => {
    const [width, ...rest] = BASE;
    const text = plantedStudy([width!.replace(/value: \S+ \+- 3 MeV/, "value: 60 to 80 MeV"), ...rest]);
    expect(texts(text)[0]).toBe(
      "1 of 3 fitted measurements are ranges, whose half-widths are no standard deviations: take chi2 and errors as rough.",
    );
  });

  const ETAS = (angle: string) => `mixing:
  - bare: [pseudoscalar-octet/eta, pseudoscalar-singlet/eta]
    states: [{ name: eta }, { name: eta'(958) }]
    convention: meson
    angle: ${angle}
`;

  test("a mixing angle from masses alone, and a singlet of which the octet knows nothing", () => {
    const heavy = "{ name: N(2200), place: N, mass: 2200 MeV, width: 150 MeV }";
    const measured = "{ width: N(2200) -> N pi, value: 60 +- 6 MeV, source: invented }";
    const said = texts(study({ members: heavy, measurements: measured, mixing: ETAS("quadratic masses") }));
    expect(said[0]).toMatch(
      /^the mixing angle of eta and eta'\(958\), -10\.\d deg, is from quadratic masses alone, /,
    );
    expect(said[0]).toMatch(
      /, and squares of masses give another than masses: measure a decay of each state\.$/,
    );
    expect(said[1]).toBe(
      "97 % of eta'(958) is in pseudoscalar-singlet, whose coupling nothing fixes: no decay into it is declared, and it counts as 0. Rows with eta'(958) are no predictions (N(2200) -> N eta'(958)).",
    );
    // Below the threshold of N eta' there is no such row.
    expect(texts(study({ mixing: ETAS("-15 deg") })).filter((text) => text.includes("eta'"))).toEqual([]);
  });

  test("the quark-line rule is an assumption, and said so", () => {
    expect(texts(studyText("tensor-nonet"))[0]).toBe(
      "the couplings of t88, t81, t18, t11 are tied by the quark-line rule: an assumption, not a result of SU(3).",
    );
  });

  test("an octet of baryons more than 20 MeV off the mass relation", () => {
    expect(texts(studyText("octet-3-2-alone"))[1]).toBe(
      "the relation of Gell-Mann and Okubo puts Xi(1820) of octet at 1857 MeV, 34 MeV from its mass; octets obey it to about 20 MeV. A member may be wrong, or mixed.",
    );
    const moved = studyText("octet-3-2-alone").replace(
      "Xi(1820), place: Xi",
      "Xi(1820), place: Xi, mass: 1840 MeV",
    );
    expect(texts(moved).filter((text) => text.includes("Okubo"))).toEqual([]);
    expect(texts(studyText("octet-3-2")).filter((text) => text.includes("Okubo"))).toEqual([]);
  });

  test.each([
    ["Lambda(1405)", "it is two poles near the N Kbar threshold"],
    ["N(1440)+", "it is no simple resonance, and partners of it by mass alone are doubtful"],
    ["f0(500)", "its pole lies far from the real axis"],
    ["K0*(700)+", "its pole lies far from the real axis"],
    ["Kbar0*(700)", "its pole lies far from the real axis"],
    ["f0(980)", "it sits at the K Kbar threshold"],
    ["a0(980)-", "it sits at the K Kbar threshold"],
    ["D_s0*(2317)+", "it sits below the D K threshold"],
  ])("%s is no plain member of a multiplet", (name, reason) => {
    expect(whyNoPlainMember(name)).toBe(reason);
  });

  test("others are, and a study with one that is not says so", () => {
    for (const name of ["Lambda(1520)", "N(1535)+", "f0(1370)", "a0(1450)0", "K", "N"])
      expect(whyNoPlainMember(name)).toBeUndefined();
    const text = study({
      members: "{ name: Lambda(1405), place: Lambda, mass: 1405 MeV, width: 50 MeV }",
      irrep: "1",
      spinParity: "1/2-",
      L: 0,
      measurements: "{ width: Lambda(1405) -> Sigma pi, value: 50 +- 2 MeV, source: invented }",
    });
    expect(texts(text)[0]).toBe(
      "Lambda(1405) is no plain member of a multiplet: it is two poles near the N Kbar threshold. Do not fit it as one (`use: table`).",
    );
  });

  test("unstable daughters are added without interference", () => {
    expect(texts(studyText("n1520-delta-pi")).at(-1)).toBe(
      "channels with an unstable daughter are added as rates, though those that end in the same particles interfere: N(1520) -> Delta(1232) pi.",
    );
  });

  test("isospin averages of masses near a threshold", () => {
    const near = { members: "{ name: N(1620), place: N, mass: 1620 MeV, width: 30 MeV }" };
    const measurements = "{ width: N(1620) -> N pi, value: 10 +- 1 MeV, source: invented }";
    const said =
      "`masses: average` is used for channels of less than 100 MeV of momentum, where only the masses of charge states will do: N(1620) -> Lambda K.";
    expect(texts(study({ ...near, measurements, masses: "average" }))).toContain(said);
    expect(texts(study({ ...near, measurements }))).not.toContain(said);
  });
});

describe("measurements that say less than their numbers", () => {
  const AXIAL =
    "the couplings of baryon-octet to baryon-octet and pseudoscalar-octet are fixed by axial measurements alone: they are axial couplings, in units of g1/f1, not those of a width model. Widths and fractions made of them mean nothing: use `couplet couplings`, not `couplet tables`.";

  test("couplings from axial measurements alone are no couplings of a width model; tables say so", () => {
    const semileptonic = studyText("semileptonic-1993");
    expect(texts(semileptonic)).toContain(AXIAL);
    const fit = fitOf(semileptonic);
    for (const { header } of [decaysMessage(complete(fit, 0)), couplingsMessage(couplingTable(fit, 0))])
      expect(header!.notes).toContain(AXIAL);
    // A strong width that the same couplings predict makes them couplings of its model; another decay's does not.
    const other = `  - { name: d, from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { width: Delta(1232) -> N pi, value: 117 +- 3 MeV, source: invented }`;
    expect(texts(semileptonic.replace("measurements:", other))).toContain(AXIAL);
    expect(texts(studyText("octet-5-2"))).not.toContain(AXIAL);
  });

  test("the note on a meson that no open channel has is not printed with a fit, and stays with its couplings", () => {
    const fit = fitOf(studyText("semileptonic-1993"));
    const note = "eta is taken as a pure octet member; eta-eta' mixing is ignored.";
    expect(fitJson(fit).notes).toEqual([]);
    expect(describeFit(fit)).not.toContain("eta-eta'");
    expect(couplingsMessage(couplingTable(fit, 0)).header!.notes).toContain(note);
    expect(fitJson(fitOf(studyText("octet-5-2"))).notes).toContain(note);
  });

  test("phases of residues with errors enter as signs, those of elastic ones not at all", () => {
    const residue = (exit: string, phase: string) =>
      `{ residue: [N(1705) -> N pi, N(1705) -> ${exit}], value: 30 +- 3 MeV, ${phase}source: invented }`;
    const said = (exit: string, phase: string) =>
      texts(study({ measurements: residue(exit, phase) })).filter((text) => text.startsWith("phases"));
    expect(said("N eta", "phase: -20 +- 5 deg, ")).toEqual([
      "phases of residues enter as signs alone, + up to 90 deg and - beyond, since couplings are real here; their values and errors are not fitted: N(1705) -> N pi and N(1705) -> N eta.",
    ]);
    expect(said("N pi", "phase: -20 +- 5 deg, ")).toEqual([
      "phases of elastic residues are not used: the amplitude is a square here, and the phase that of the background: N(1705) -> N pi and N(1705) -> N pi. Where it is large, take the couplings as rough.",
    ]);
    for (const exit of ["N eta", "N pi"])
      for (const phase of ["", "phase: 0 deg, "]) expect(said(exit, phase)).toEqual([]);
  });
});

describe("warnings of parents, once an isospin multiplet", () => {
  const N_STATES = ["X(2000)+", "X(2000)0"];
  const wide = (width: number, measurements: string) =>
    study({
      members: `{ name: X(2000), place: N, mass: 2000 MeV, width: ${width} MeV }`,
      measurements,
    });
  const WIDTH = "{ width: X(2000) -> N pi, value: 60 +- 6 MeV, source: invented }";
  const RESIDUE = "{ residue: [X(2000) -> N pi, X(2000) -> N pi], value: 30 +- 3 MeV, source: invented }";

  test("a width above 15 % of the mass", () => {
    const said = {
      parents: N_STATES,
      text: "X(2000): its width is 16 % of its mass. Breit-Wigner widths and fractions depend on their definition there: prefer pole residues (`residue`).",
    };
    expect(warnings(wide(320, WIDTH))).toContainEqual(said);
    expect(warnings(wide(290, WIDTH))).not.toContainEqual(expect.objectContaining({ parents: N_STATES }));
    expect(warnings(wide(320, RESIDUE))).not.toContainEqual(expect.objectContaining({ parents: N_STATES }));
  });

  test("pole residues beside Breit-Wigner quantities", () => {
    expect(warnings(wide(290, `${WIDTH}, ${RESIDUE}`))).toContainEqual({
      parents: N_STATES,
      text: "X(2000): Breit-Wigner quantities and pole residues are fitted together, two definitions of one coupling.",
    });
  });

  test("an S wave that opens within the width, and a fitted channel of any wave", () => {
    const members = "{ name: N(1530), place: N, mass: 1530 MeV, width: 150 MeV }";
    const measurements = "{ fraction: N(1530) -> N pi, value: 0.45 +- 0.05, source: invented }";
    expect(texts(study({ members, measurements, spinParity: "1/2-", L: 0 }))).toContain(
      "N(1530): N eta opens 43 MeV below its mass, within its width of 150 MeV; Lambda K opens 81 MeV above its mass, within its width of 150 MeV. Breit-Wigner widths and fractions depend on their definition there: prefer pole residues (`residue`).",
    );
    const eta = measurements.replace("N pi", "N eta");
    const D = { members, spinParity: "3/2-", L: 2 };
    expect(texts(study({ ...D, measurements: eta }))).toContain(
      "N(1530): N eta opens 43 MeV below its mass, within its width of 150 MeV. Breit-Wigner widths and fractions depend on their definition there: prefer pole residues (`residue`).",
    );
    expect(texts(study({ ...D, measurements })).filter((text) => text.includes("opens"))).toEqual([]);
  });

  test("predictions more than a factor 2 in momentum from what is fitted", () => {
    const said = warnings(studyText("octet-5-2")).filter(({ parents }) => parents.length > 0);
    expect(said.map(({ parents }) => parents)).toEqual([
      ["N(1675)+", "N(1675)0"],
      ["Sigma(1775)+", "Sigma(1775)0", "Sigma(1775)-"],
      ["Lambda(1830)"],
    ]);
    expect(said[0]!.text).toBe(
      "N(1675): momenta far from the fitted ones (by more than a factor 2, or above 1000 MeV), where no width model is reliable: Lambda K at 212 MeV, fitted at 472 to 563 MeV.",
    );
  });

  test("an upper limit is no fitted momentum, and its channel a predicted one", () => {
    const members = "{ name: N(1730), place: N, mass: 1730 MeV, width: 150 MeV }";
    const pion = "{ width: N(1730) -> N pi, value: 60 +- 6 MeV, source: invented }";
    const sigma = (value: string) => `{ width: N(1730) -> Sigma K, value: ${value}, source: invented }`;
    const far = (...measurements: string[]) =>
      texts(study({ members, measurements: measurements.join() })).flatMap((text) =>
        text.includes("far from") ? [text.split("reliable: ")[1]] : [],
      );
    const both = ["Sigma K at 172 MeV, fitted at 600 MeV; Lambda K at 294 MeV, fitted at 600 MeV."];
    expect(far(pion)).toEqual(both);
    expect(far(pion, sigma('"< 50 MeV at 90 %"'))).toEqual(both);
    expect(far(pion, sigma("5 +- 2 MeV"))).toEqual([]);
  });

  test("or above 1 GeV, however near", () => {
    const members = "{ name: N(2600), place: N, mass: 2600 MeV, width: 100 MeV }";
    const measured = (channel: string) =>
      `{ width: N(2600) -> ${channel}, value: 10 +- 1 MeV, source: invented }`;
    const [text] = texts(study({ members, measurements: measured("Lambda K") })).slice(-1);
    expect(text).toBe(
      "N(2600): momenta far from the fitted ones (by more than a factor 2, or above 1000 MeV), where no width model is reliable: N pi at 1126 MeV, fitted at 991 MeV; N eta at 1054 MeV, fitted at 991 MeV.",
    );
    // A channel that is measured is not extrapolated to.
    const both = `${measured("Lambda K")}, ${measured("N pi")}`;
    expect(texts(study({ members, measurements: both })).at(-1)).toContain(
      "N eta at 1054 MeV, fitted at 991 to 1126 MeV",
    );
  });
});

describe("flags of rows", () => {
  const rows = tablesOf(studyText("octet-5-2")).parents.flatMap((parent) => parent.rows);
  const flagged = (flag: Flag) => [
    ...new Set(rows.filter(({ flags }) => flags.includes(flag)).map(({ isospin }) => isospin!.channel)),
  ];

  test("small amplitude: below a fifth of the coupling strength", () => {
    // At alpha = -0.24 the squares are 0.090 and 0.180 g^2 (0.461 for Sigma -> Sigma pi), and 0.04 of 20/3 D^2 + 12 F^2 is
    // 0.438 g^2, g = F + D.
    expect(flagged("small-amplitude")).toEqual(["N(1675) -> Lambda K", "Lambda(1830) -> N Kbar"]);
  });

  test("near threshold: a momentum below 100 MeV, or a threshold within one width, open or closed", () => {
    expect(flagged("near-threshold").sort()).toEqual([
      "Lambda(1830) -> Xi K",
      "N(1675) -> Lambda K",
      "N(1675) -> Sigma K",
      "Sigma(1775) -> Sigma eta",
      "Sigma(1775) -> Xi K",
    ]);
  });
});

describe("warnings reach people and tables", () => {
  const fit = fitOf(studyText("octet-5-2"));
  const all = validityWarnings(fit, 0);

  test("`couplet fit` prints each once, and gives them as data", () => {
    const printed = describeFit(fit);
    expect(printed.match(/^Warning: .*$/gm)).toEqual(all.map(({ text }) => `Warning: ${text}`));
    expect(fitJson(fit).warnings).toEqual(all);
  });

  test("tables carry those of the study in the header's notes, those of a parent with it", () => {
    const message = decodeDecays(encodeDecays(complete(fit, 0)), "made.pb");
    expect(message.header.notes).toEqual([...fit.model.notes, MISSING_XI, AVERAGES]);
    const nucleon = message.parents.find(({ hadron }) => hadron?.name === "N(1675)+")!;
    const percent = (100 * nucleon.rows.at(-1)!.fraction!.value!).toFixed(1);
    expect(nucleon.warnings).toEqual([
      `N(1675)+: ${percent} % of the width has no channel in this study; do not rely on the fractions as a set.`,
      all.find(({ parents }) => parents.includes("N(1675)+"))!.text,
      expect.stringMatching(
        /^N\(1675\)\+: fractions over the line shape .*: N\(1675\)\+ -> Sigma\+ K0, N\(1675\)\+ -> Sigma0 K\+\. They/,
      ),
    ]);
    expect(describeParent(nucleon).match(/^ {2}WARNING: .*$/gm)).toEqual(
      nucleon.warnings.map((text) => `  WARNING: ${text}`),
    );
  });

  test("`couplet fit --models` says where the models differ by more than the error of the data", () => {
    const printed = (of: ReturnType<typeof fitOf>) =>
      describeUncertainties(of, { models: modelSpread(of, 0) }).match(/^ {2}WARNING.*$/gm);
    expect(printed(fit)).toEqual([
      "  WARNING: half the range over the models is larger than the error of the data for F/D (0.035 against 0.020), alpha_F (0.050 against 0.031): quote the spread as the error",
    ]);
    expect(printed(fitOf(withMeasurements(studyText("decuplet"), ["Delta(1232)"])))).toBe(null);
  });
});
