import { describe, expect, test } from "vitest";
import { formatRoot, multiplyRoots, signedRoot } from "../../src/exact/signed-root.js";
import { parseIrrep } from "../../src/su3/irrep.js";
import { octetMatrixStates } from "../../src/su3/matrix-phases.js";
import { type TensorComponent, tensorOverlap, tensorStates } from "../../src/su3/tensor-form.js";
import { irrepsUpTo } from "../support/irreps-up-to.js";
import { sumOfRoots } from "../support/sum-of-roots.js";

const LETTERS = ["u", "d", "s"];

/** `uud` or `us/d`: upper indices, then lower ones behind a slash. */
function indexText({ quarks, antiquarks }: TensorComponent): string {
  const text = (counts: readonly number[]) => counts.map((n, i) => LETTERS[i]!.repeat(n)).join("");
  return text(antiquarks) === "" ? text(quarks) : `${text(quarks)}/${text(antiquarks)}`;
}

describe("states as tensors", () => {
  test("of irreps with p + q <= 3, and the 27, are orthonormal and traceless, exactly", () => {
    for (const irrep of [...irrepsUpTo(3), parseIrrep("27")]) {
      const list = tensorStates(irrep);
      list.forEach((state, i) => {
        list.slice(i).forEach((other, j) => {
          expect(formatRoot(sumOfRoots(tensorOverlap(state.components, other)))).toBe(j === 0 ? "1" : "0");
        });
        expect(traceTerms(state.components).every((terms) => sumOfRoots(terms).sign === 0)).toBe(true);
      });
    }
  });

  test("of the octet are its matrices with their phases", () => {
    const matrices = octetMatrixStates();
    tensorStates(parseIrrep("8")).forEach(({ components }, i) => {
      const { entries, square, phase } = matrices[i]!;
      const expected = entries.flatMap((row, a) =>
        row.flatMap((value, b) =>
          value === 0
            ? []
            : [`${LETTERS[a]}/${LETTERS[b]} ${formatRoot(signedRoot(phase * value, value * value, square))}`],
        ),
      );
      expect(components.map((c) => `${indexText(c)} ${formatRoot(c.value)}`).sort()).toEqual(expected.sort());
    });
  });

  test("of the decuplet have the usual components, all positive", () => {
    // E.g. E. Jenkins and A.V. Manohar, Phys. Lett. B 259 (1991) 353 (provenance: memory).
    const text = tensorStates(parseIrrep("10")).map(({ components }) =>
      components.map((c) => `${indexText(c)} ${formatRoot(c.value)}`).join(),
    );
    expect(text).toEqual([
      "uuu 1",
      "uud sqrt(1/3)",
      "udd sqrt(1/3)",
      "ddd 1",
      "uus sqrt(1/3)",
      "uds sqrt(1/6)",
      "dds sqrt(1/3)",
      "uss sqrt(1/3)",
      "dss sqrt(1/3)",
      "sss 1",
    ]);
  });

  test("of a product of tensors of two octets, projected on the 27, give its coupled state", () => {
    // The top state of 27 in 8 x 8 is K+ K+, whose tensor is the product of two matrices E_us.
    const [top] = tensorStates(parseIrrep("27"));
    expect(top!.components.map((c) => `${indexText(c)} ${formatRoot(c.value)}`)).toEqual(["uu/ss 1"]);
  });
});

/** For each pattern of the other indices, the terms of the sum over one upper and one lower index set equal. */
function traceTerms(components: readonly TensorComponent[]) {
  const sums = new Map<string, ReturnType<typeof signedRoot>[]>();
  for (const { quarks, antiquarks, value } of components) {
    for (const flavour of [0, 1, 2]) {
      if (quarks[flavour] === 0 || antiquarks[flavour] === 0) continue;
      const less = (counts: readonly number[]) => counts.map((n, i) => (i === flavour ? n - 1 : n));
      const key = [...less(quarks), ...less(antiquarks)].join();
      sums.set(key, [...(sums.get(key) ?? []), multiplyRoots(value, signedRoot(1, 1))]);
    }
  }
  return [...sums.values()];
}
