import { describe, expect, test } from "vitest";
import type { Form, FormMaker } from "../../src/couplings/form.js";
import { InputError } from "../../src/errors.js";
import { addRoots } from "../../src/exact/root-sum.js";
import { formatRoot, multiplyRoots, rootToNumber, type SignedRoot } from "../../src/exact/signed-root.js";
import { clebschGordan } from "../../src/su2/clebsch-gordan.js";
import { isospinMultiplets } from "../../src/su3/irrep.js";
import { states } from "../../src/su3/state.js";
import { BARYONS, DECUPLET, MESONS, makerOf, placeOfMember, stateOf } from "./schemes.js";

const octets = makerOf("8", ["8", "8"]);
const decuplet = makerOf("10", ["8", "8"]);
const toDecuplet = makerOf("8", ["10", "8"]);

/** Decays of one coupling each or several, of every kind of irrep; small, so that all charges are done. */
const GRID: [string, string[]][] = [
  ["1", ["8", "8"]],
  ["8", ["8", "8"]],
  ["10", ["8", "8"]],
  ["10bar", ["8", "8"]],
  ["27", ["8", "8"]],
  ["8", ["10", "8"]],
  ["10", ["10", "8"]],
  ["35", ["10", "8"]],
  ["10bar", ["10bar", "8"]],
  ["27", ["27", "8"]],
  ["3bar", ["3bar", "8"]],
  ["6", ["3bar", "8"]],
  ["8", ["15(2,1)", "3bar"]],
  ["8", ["3", "3bar"]],
  ["8", ["3", "3", "3"]],
  ["10", ["8", "8", "8"]],
  ["8", ["8", "8", "8"]],
];

const coefficients = ({ terms }: Form, reduced: number): SignedRoot[] =>
  terms.filter((term) => term.reduced === reduced).map(({ c }) => c);

/** Sum over charge channels of the product of two couplings' coefficients, in exact terms. */
function overlap(forms: readonly Form[], a: number, b: number): string[] {
  const products = forms.flatMap((form) =>
    coefficients(form, a).flatMap((x) => coefficients(form, b).map((y) => multiplyRoots(x, y))),
  );
  return addRoots(products).map(formatRoot);
}

describe("exact forms", () => {
  test.each(GRID)("%s -> %j: from each state, couplings are normalised and orthogonal", (from, to) => {
    const maker = makerOf(from, to);
    for (const initial of states(maker.scheme.from.irrep)) {
      const forms = maker.chargeForms(initial);
      maker.reduced.forEach((_, a) => {
        maker.reduced.forEach((__, b) => {
          expect([initial, a, b, overlap(forms, a, b)]).toEqual([initial, a, b, a === b ? ["1"] : []]);
        });
      });
    }
  });

  test.each(GRID.filter(([, to]) => to.length === 2))(
    "%s -> %j: a charge form is the isospin form times its SU(2) coefficient",
    (from, to) => {
      const maker = makerOf(from, to);
      for (const initial of states(maker.scheme.from.irrep)) {
        const fromIsospin = maker
          .isospinForms(initial)
          .flatMap((form) => chargesOf(maker, form, initial.twoI3));
        const direct = maker.chargeForms(initial).map(shown);
        expect(direct.sort()).toEqual(fromIsospin.sort());
      }
    },
  );

  test("with an operator that has isospin, couplings are normalised and orthogonal over all its components", () => {
    // Charmed mesons into two octets by the six operators of a 6bar: sum of squares = dimension of the entry.
    const sixbar = states({ p: 0, q: 2 });
    const operator = { name: "6bar", parts: sixbar.map((state) => ({ state, weight: 1 })), complex: true };
    const maker = makerOf("3bar", ["8", "8"], operator);
    expect(maker.reduced.map(({ name }) => name)).toEqual(["h(8; 8_1)", "h(8; 8_2)", "h(10bar; 10bar)"]);
    const forms = states(maker.scheme.from.irrep).flatMap((initial) =>
      sixbar.flatMap((part) => maker.chargeForms(initial, part)),
    );
    const gram = maker.reduced.map((_, a) => maker.reduced.map((__, b) => overlap(forms, a, b).join("")));
    expect(gram).toEqual([
      ["8", "", ""],
      ["", "8", ""],
      ["", "", "10"],
    ]);
  });

  test("charges, strangeness and the number of channels of the octet add up", () => {
    for (const initial of states(octets.scheme.from.irrep)) {
      for (const { finals } of octets.chargeForms(initial)) {
        const [baryon, meson] = finals.map(({ state }) => state);
        expect(baryon!.threeY + meson!.threeY).toBe(initial.threeY);
        expect(baryon!.twoI3 + meson!.twoI3).toBe(initial.twoI3);
      }
    }
    const channels = isospinMultiplets({ p: 1, q: 1 }).map((place) => octets.isospinForms(place).length);
    // N, Sigma, Lambda, Xi: 17 isospin channels.
    expect(channels).toEqual([4, 5, 4, 4]);
  });

  test("a channel that isospin or flavour symmetry forbids has no terms", () => {
    const [sigma0, pi0] = [stateOf(BARYONS, "Sigma0"), stateOf(MESONS, "pi0")];
    expect(octets.chargeForm(sigma0, [sigma0, pi0]).terms).toEqual([]);
    const sigma = placeOfMember(BARYONS, "Sigma");
    const decay = makerOf("10", ["10", "8"]);
    expect(decay.isospinForm(sigma, [sigma, placeOfMember(MESONS, "eta")]).terms).toEqual([]);
    expect(octets.chargeForm(sigma0, [sigma0, stateOf(MESONS, "pi+")]).terms).toEqual([]);
  });

  test("the rate of an Omega-like state to Xi0 K- is 3/2 of that of Delta+ to p pi0, by phase space alone", () => {
    // Worked example of the Review of Particle Physics: S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001
    // (2024), review "SU(3) isoscalar factors and representation matrices"; provenance: memory.
    const omega = decuplet.chargeForm(stateOf(DECUPLET, "Omega-"), [
      stateOf(BARYONS, "Xi0"),
      stateOf(MESONS, "K-"),
    ]);
    const delta = decuplet.chargeForm(stateOf(DECUPLET, "Delta(1232)+"), [
      stateOf(BARYONS, "p"),
      stateOf(MESONS, "pi0"),
    ]);
    expect([omega, delta].map(({ terms }) => formatRoot(terms[0]!.c))).toEqual(["sqrt(1/2)", "-sqrt(1/3)"]);
  });

  test.each([
    [decuplet, DECUPLET, "Delta(1232)+", BARYONS, ["p pi0", "n pi+"], [2 / 3, 1 / 3]],
    [octets, BARYONS, "p", BARYONS, ["n pi+", "p pi0"], [2 / 3, 1 / 3]],
    [octets, BARYONS, "Sigma+", BARYONS, ["Sigma+ pi0", "Sigma0 pi+"], [1 / 2, 1 / 2]],
    [octets, BARYONS, "Sigma0", BARYONS, ["Sigma0 pi0", "Sigma+ pi-", "Sigma- pi+"], [0, 1 / 2, 1 / 2]],
    [octets, BARYONS, "Lambda", BARYONS, ["Sigma0 pi0", "Sigma+ pi-", "Sigma- pi+"], [1 / 3, 1 / 3, 1 / 3]],
    [octets, BARYONS, "Xi0", BARYONS, ["Xi- pi+", "Xi0 pi0"], [2 / 3, 1 / 3]],
    [
      toDecuplet,
      BARYONS,
      "p",
      DECUPLET,
      ["Delta(1232)++ pi-", "Delta(1232)+ pi0", "Delta(1232)0 pi+"],
      [1 / 2, 1 / 3, 1 / 6],
    ],
    [
      makerOf("10", ["10", "8"]),
      DECUPLET,
      "Delta(1232)+",
      DECUPLET,
      ["Delta(1232)++ pi-", "Delta(1232)+ pi0", "Delta(1232)0 pi+"],
      [2 / 5, 1 / 15, 8 / 15],
    ],
  ] as const)("charge split %#", (maker, parents, parent, baryons, channels, expected) => {
    const amplitudes = channels.map((channel) => {
      const [baryon, meson] = channel.split(" ") as [string, string];
      const form = maker.chargeForm(stateOf(parents, parent), [
        stateOf(baryons, baryon),
        stateOf(MESONS, meson),
      ]);
      return form.terms.reduce((sum, { c }) => sum + rootToNumber(c), 0);
    });
    const total = amplitudes.reduce((sum, a) => sum + a * a, 0);
    amplitudes.forEach((a, k) => {
      expect((a * a) / total).toBeCloseTo(expected[k]!, 12);
    });
  });

  test("states of another irrep, or too few of them, are refused", () => {
    const proton = stateOf(BARYONS, "p");
    expect(() => octets.chargeForm(proton, [proton])).toThrow(
      new InputError("chargeForm: finals: expected 2 states, got 1."),
    );
    expect(() => octets.chargeForm(stateOf(DECUPLET, "Omega-"), [proton, stateOf(MESONS, "K-")])).toThrow(
      new InputError('chargeForm: irrep of the state of 8: expected {"p":1,"q":1}, got {"p":3,"q":0}.'),
    );
    expect(() => makerOf("10", ["8", "8", "8"]).isospinForms({ threeY: 3, twoI: 3 })).toThrow(
      new InputError(
        "isospinForm: finals of the decay: expected two, got 3. Use the forms of its charge channels.",
      ),
    );
  });
});

function shown({ finals, terms }: Pick<Form, "finals" | "terms">): string {
  const labels = finals.map(({ state: { threeY, twoI, twoI3 } }) => [threeY, twoI, twoI3].join(","));
  return `${labels.join(" ")}: ${terms.map(({ reduced, c }) => `${formatRoot(c)} g${reduced}`).join(" ")}`;
}

/** The charge forms an isospin form stands for. */
function chargesOf(
  maker: FormMaker,
  form: ReturnType<FormMaker["isospinForms"]>[number],
  twoI3: number,
): string[] {
  const [first, second] = form.finals;
  const list: string[] = [];
  for (let twoM1 = -first.twoI; twoM1 <= first.twoI; twoM1 += 2) {
    const twoM2 = twoI3 - twoM1;
    if (Math.abs(twoM2) > second.twoI) continue;
    const su2 = clebschGordan(first.twoI, twoM1, second.twoI, twoM2, form.initial.twoI, twoI3);
    if (su2.sign === 0) continue;
    const finals = [
      {
        multiplet: maker.scheme.to[0]!.id,
        state: { irrep: maker.scheme.to[0]!.irrep, ...first, twoI3: twoM1 },
      },
      {
        multiplet: maker.scheme.to[1]!.id,
        state: { irrep: maker.scheme.to[1]!.irrep, ...second, twoI3: twoM2 },
      },
    ];
    const terms = form.terms.map(({ reduced, c }) => ({ reduced, c: multiplyRoots(c, su2) }));
    list.push(shown({ finals, terms }));
  }
  return list;
}
