import { describe, expect, test } from "vitest";
import { byVertexFamily } from "../../src/tables/vertex-families.js";

/** A row with one component for each family, given as multiplets. */
const row = (id: string, twoL: number, ...families: readonly string[]) => ({
  id,
  twoL,
  twoS: 1,
  components: families.map((family) => ({
    states: family.split(" ").map((multiplet) => ({ multiplet })),
  })),
});

const grouped = (...rows: Parameters<typeof byVertexFamily>[0]) =>
  byVertexFamily(rows).map(({ families, rows: own }) => [families, own.map(({ id }) => id)]);

describe("couplings by vertex family", () => {
  test("families and waves stand apart, in the order of their first rows", () => {
    expect(
      grouped(row("1", 2, "r b m"), row("2", 2, "r b s"), row("3", 4, "r b m"), row("4", 2, "r b m")),
    ).toEqual([
      [["r -> b m"], ["1", "4"]],
      [["r -> b s"], ["2"]],
      [["r -> b m"], ["3"]],
    ]);
  });

  test("a mixed hadron joins its families, also groups that began before it, and rows keep their order", () => {
    expect(
      grouped(
        row("1", 2, "r b m"),
        row("2", 2, "r b s"),
        row("3", 2, "r b m", "r b s"),
        row("4", 2, "r b s"),
      ),
    ).toEqual([
      [
        ["r -> b m", "r -> b s"],
        ["1", "2", "3", "4"],
      ],
    ]);
  });
});
