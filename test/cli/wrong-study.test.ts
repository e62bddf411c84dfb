import { writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, describe, expect, test } from "vitest";
import { errorText } from "../../src/cli/error-text.js";
import { fitStudyFile } from "../../src/cli/run-study.js";
import { CoupletError } from "../../src/errors.js";
import { catalogueMultipletIds } from "../../src/hadrons/catalogue-multiplet.js";
import { studySchema } from "../../src/study/schema.js";
import { couplet, type Run, refusal, scratchFolder } from "./command.js";

const SHORT = `couplet: 1
title: short
decays:
  - { from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
measurements:
  - { width: Delta(1232) -> N pi, value: 117 +- 3 MeV, source: invented }
`;

const { folder, remove } = scratchFolder();
afterAll(remove);

/** What `couplet fit` says of a study's text, called without starting a process; the file's name is `s.yaml`. */
function said(text: string): Run {
  const file = join(folder, "s.yaml");
  writeFileSync(file, text);
  try {
    fitStudyFile(file);
  } catch (error) {
    if (!(error instanceof CoupletError)) throw error;
    const text = errorText(error.message.replaceAll(file, "s.yaml"));
    return { code: error.exitCode, out: "", error: `${text}\n` };
  }
  throw new Error("the study was not refused");
}

const changed = (from: string, to: string) => {
  expect(SHORT).toContain(from);
  return SHORT.replace(from, to);
};

const MULTIPLETS = catalogueMultipletIds().join(", ");
const KEYS = Object.keys(studySchema.shape).join(", ");

describe("an unknown name is refused with the nearest ones", () => {
  test("of a hadron", () => {
    expect(said(changed("Delta(1232) -> N pi", "Dleta(1232) -> N pi"))).toEqual(
      refusal(
        's.yaml:6:14: measurements/0/width: expected a hadron of this study, got "Dleta(1232)". Did you mean Delta(1232), Delta(1232)+, Delta(1232)0?',
      ),
    );
  });

  test("of a multiplet", () => {
    expect(said(changed("from: baryon-decuplet", "from: barion-decuplet"))).toEqual(
      refusal(
        `s.yaml:4:13: decays/0/from: expected a multiplet of this study (it has none) or of the catalogue (${MULTIPLETS}), got "barion-decuplet". Did you mean baryon-decuplet?`,
      ),
    );
  });

  test("of a width model", () => {
    expect(said(changed("model: a", "model: breit-wigner"))).toEqual(
      refusal(
        's.yaml:4:83: decays/0/model: expected one of a, b, c, d, e, got "breit-wigner". Choose from: a (power of the momentum), b (momentum with a range), c (centrifugal barrier), d (effective Lagrangian, baryon to spin-1/2 baryon and spinless meson), e (effective Lagrangian, mesons).',
      ),
    );
  });
});

describe("an impossible channel is refused", () => {
  const channels =
    "Sigma(1385) -> N Kbar; Sigma(1385) -> Sigma pi; Sigma(1385) -> Sigma eta; Sigma(1385) -> Lambda pi; Sigma(1385) -> Xi K";

  test.each([
    ["charge", "Sigma(1385)+ -> Lambda pi-"],
    ["isospin", "Sigma(1385) -> Lambda eta"],
    ["strangeness", "Sigma(1385) -> N pi"],
  ])("by %s", (_, channel) => {
    expect(said(changed("Delta(1232) -> N pi", channel))).toEqual(
      refusal(
        `s.yaml:6:14: measurements/0/width: expected a channel of this study that conserves charge, isospin and strangeness, got "${channel}". There are: ${channels}.`,
      ),
    );
  });

  test("by its threshold", () => {
    expect(said(changed("Delta(1232) -> N pi", "Delta(1232) -> Sigma K"))).toEqual(
      refusal(
        "s.yaml:6:14: measurements/0/width: expected a channel that is open, got Delta(1232)++ -> Sigma+ K+ with its threshold at 1683.0 MeV above the parent's 1232 MeV. Check the masses, or take the measurement out.",
      ),
    );
  });

  test.each([
    ["parity", "L: 2", 2],
    ["spin", "L: 3", 3],
  ])("by %s, with the waves there are", (_, wave, L) => {
    expect(said(changed("L: 1", wave))).toEqual(
      refusal(
        `s.yaml:4:5: decays/0: L: expected a wave that spin and parity allow, got ${L}. They allow: L=1 S=1/2.`,
      ),
    );
  });

  const withMultiplet = (irrep: string) =>
    changed(
      "decays:",
      `multiplets:
  mine:
    irrep: ${irrep}
    spinParity: 3/2+
    members: [{ name: X(1900), place: Y=1/3 I=1/2, mass: 1900 MeV, width: 100 MeV }]
decays:`,
    )
      .replace("from: baryon-decuplet", "from: mine")
      .replace("Delta(1232) -> N pi", "X(1900) -> N pi");

  test("by triality", () => {
    expect(said(withMultiplet("3"))).toEqual(
      refusal(
        's.yaml:9:5: decays/0: reducedCouplings: mine by the operator strong: expected a product of flavours that meets 8 x 8 = 1, 2 x 8, 10, 10bar, 27, got "3". SU(3) forbids this decay; check the irreps of the multiplets.',
      ),
    );
  });

  test("by an irrep that is not in the product", () => {
    const text = withMultiplet("64").replace("Y=1/3 I=1/2", "Y=1 I=1/2");
    expect(said(text)).toEqual(
      refusal(
        's.yaml:9:5: decays/0: reducedCouplings: mine by the operator strong: expected a product of flavours that meets 8 x 8 = 1, 2 x 8, 10, 10bar, 27, got "64". SU(3) forbids this decay; check the irreps of the multiplets.',
      ),
    );
  });

  test("by baryon number, and with the daughters in the wrong order", () => {
    expect(said(changed("pseudoscalar-octet", "baryon-octet"))).toEqual(
      refusal("s.yaml:4:5: decays/0: to: expected two multiplets of baryon number 1 together, got 2."),
    );
    expect(said(changed("[baryon-octet, pseudoscalar-octet]", "[pseudoscalar-octet, baryon-octet]"))).toEqual(
      refusal(
        's.yaml:4:5: decays/0: to: expected the baryon first, the meson second, got "pseudoscalar-octet, baryon-octet". Exchange them: the order fixes the sign of F.',
      ),
    );
  });

  test("that is no channel at all", () => {
    expect(said(changed("Delta(1232) -> N pi", "Delta(1232) N pi"))).toEqual(
      refusal(
        's.yaml:6:14: measurements/0/width: expected a channel such as `N(1675) -> N pi`, got "Delta(1232) N pi".',
      ),
    );
  });

  test("of an irrep whose dimension means several", () => {
    expect(said(withMultiplet("15"))).toEqual(
      refusal(
        's.yaml:5:12: multiplets/mine/irrep: expected 15(2,1) or 15(4,0), got "15". Dimension 15 belongs to several irreps; write the labels.',
      ),
    );
  });
});

describe("a value that cannot be", () => {
  const VALUE = "s.yaml:6:42: measurements/0/value: ";
  test.each([
    ["117 +- 3", `${VALUE}expected a unit such as MeV or GeV, got none in "117 +- 3".`],
    ["-117 +- 3 MeV", `${VALUE}expected a value >= 0, got "-117 +- 3 MeV".`],
    ["1e999 MeV", `${VALUE}expected a number that fits a double, got "1e999 MeV".`],
    [
      "117 MeV",
      `${VALUE}expected an error, since the value enters the fit. Write \`value +- error\`, or give it \`use: table\`.`,
    ],
  ])("such as a width of %s is refused", (value, message) => {
    expect(said(changed("117 +- 3 MeV", value))).toEqual(refusal(message));
  });

  test("such as a fraction above one is refused", () => {
    const text = changed(
      "width: Delta(1232) -> N pi, value: 117 +- 3 MeV",
      "fraction: Delta(1232) -> N pi, value: 1.2 +- 0.1",
    );
    expect(said(text)).toEqual(
      refusal('s.yaml:6:45: measurements/0/value: expected a fraction from 0 to 1, got "1.2 +- 0.1".'),
    );
  });
});

test("everything that is wrong in a file is said at once: syntax, form and content", () => {
  const text = `couplet: 1
titel: Many things are wrong here
title: once
title: twice
multiplets:
  octet:
    irrep: 8
    spinParity: 5/2-
    members:
      - { name: N(1675), place: N, mass: 1675, width: 145 MeV }
      - { name: Lambda(1830), place: Lambda, mass: 1825 MeV, width: -90 MeV }
      - { name: Sigma(1775), place: Sigma, mass: 1775 MeV, width: 120 MeV, colour: red }
  other:
    irrep: 15
    spinParity: 5/2-
    members: [{ name: N(1900), place: N, mass: 1900 MeV, width: 145 MeV }]
decays:
  - { name: a, from: octet, to: [baryon-octet, pseudoscalar-octet], L: 2, model: a }
  - { name: b, from: barion-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 1, model: a }
  - { name: c, from: baryon-decuplet, to: [baryon-octet, pseudoscalar-octet], L: 2, model: a }
  - { name: d, from: baryon-decuplet, to: [baryon-octet], L: one, model: a }
measurements:
  - { width: N(1675) -> N pi, value: 117 +- 3, source: invented }
  - { width: Dleta(1232) -> N pi, value: 117 +- 3 MeV, source: invented }
  - { fraction: Lambda(1830) -> N Kbar, value: 1.2 +- 0.1, source: invented }
  - { fraction: Lambda(1830)0 -> N Kbar, value: 0.2, source: invented }
  - { fraction: Lambda(1830) N Kbar, value: 0.2 +- 0.1, source: invented }
  - { widht: Lambda(1830) -> N Kbar, value: 1e999 MeV, source: invented }
`;
  writeFileSync(join(folder, "s.yaml"), text);
  expect(couplet(folder, "fit", "s.yaml")).toEqual(
    refusal(
      [
        `s.yaml:2:1: study: expected keys among ${KEYS}, got \`titel\` (did you mean \`title\`?).`,
        "s.yaml:4:1: not valid YAML: expected each key once, got it again. Take one of them out.",
        's.yaml:10:42: multiplets/octet/members/0/mass: expected a unit such as MeV or GeV, got none in "1675".',
        's.yaml:11:69: multiplets/octet/members/1/width: expected a width > 0, got "-90 MeV".',
        "s.yaml:12:76: multiplets/octet/members/2: expected keys among name, place, mass, width, chargeStates, got `colour`.",
        's.yaml:14:12: multiplets/other/irrep: expected 15(2,1) or 15(4,0), got "15". Dimension 15 belongs to several irreps; write the labels.',
        `s.yaml:19:22: decays/1/from: expected a multiplet of this study (it has none) or of the catalogue (${MULTIPLETS}), got "barion-decuplet". Did you mean baryon-decuplet?`,
        "s.yaml:20:5: decays/2: L: expected a wave that spin and parity allow, got 2. They allow: L=1 S=1/2.",
        's.yaml:21:43: decays/3/to: expected at least 2 entries, got ["baryon-octet"].',
        's.yaml:21:62: decays/3/L: expected a number, got "one".',
        's.yaml:23:38: measurements/0/value: expected a unit such as MeV or GeV, got none in "117 +- 3".',
        's.yaml:24:14: measurements/1/width: expected a hadron of this study, got "Dleta(1232)". Did you mean Delta(1232), Delta(1232)-, Delta(1232)0?',
        's.yaml:25:48: measurements/2/value: expected a fraction from 0 to 1, got "1.2 +- 0.1".',
        "s.yaml:26:49: measurements/3/value: expected an error, since the value enters the fit. Write `value +- error`, or give it `use: table`.",
        's.yaml:27:17: measurements/4/fraction: expected a channel such as `N(1675) -> N pi`, got "Lambda(1830) N Kbar".',
        "s.yaml:28:5: measurements/5/width: expected a text, got nothing.",
        "s.yaml:28:7: measurements/5: expected keys among width, value, normalisation, source, use, got `widht` (did you mean `width`?).",
        's.yaml:28:45: measurements/5/value: expected a number that fits a double, got "1e999 MeV".',
      ].join("\n"),
    ),
  );
});

test("a file that is no study is refused", () => {
  const start = "Start one with `couplet new NAME`.";
  expect(said("")).toEqual(refusal(`s.yaml: expected a study, got an empty file. ${start}`));
  expect(said("couplet: 1\0")).toEqual(
    refusal("s.yaml: expected a YAML text, got a binary file. Is this the right file?"),
  );
  expect(said("x".repeat(50_000_000))).toEqual(
    refusal("s.yaml: expected a study of at most 1000000 bytes, got more. Is this the right file?"),
  );
  expect(couplet(folder, "fit", "/dev/zero")).toEqual(
    refusal("/dev/zero: expected a study of at most 1000000 bytes, got more. Is this the right file?"),
  );
  expect(couplet(folder, "fit", "absent.yaml")).toEqual(
    refusal("absent.yaml: could not be read: ENOENT: no such file or directory. Check the path."),
  );
  expect(couplet(folder, "fit", ".")).toEqual(
    refusal(".: could not be read: EISDIR: illegal operation on a directory. Check the path."),
  );
});
