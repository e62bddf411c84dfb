import { describe, expect, test } from "vitest";
import { catalogueParticle, catalogueParticles } from "../../src/hadrons/catalogue.js";
import { antiparticle, antiparticleName } from "../../src/hadrons/particle.js";

describe("antiparticles", () => {
  test.each([
    ["pi+", "pi-"],
    ["K0", "K0bar"],
    ["K-", "K+"],
    ["K*(892)0bar", "K*(892)0"],
    ["p", "pbar"],
    ["Sigma+", "Sigma+bar"],
    ["Delta(1232)++", "Delta(1232)++bar"],
    ["D_s+", "D_s-"],
    ["Lambda_c+", "Lambda_c+bar"],
  ])("of %s is %s", (name, other) => {
    expect(antiparticleName(catalogueParticle(name))).toBe(other);
  });

  test.each(["pi0", "eta", "rho(770)0", "phi(1020)", "J/psi(1S)"])("%s is its own", (name) => {
    expect(antiparticle(catalogueParticle(name))).toBeNull();
  });

  test("of the antiparticle is the particle", () => {
    for (const particle of catalogueParticles()) {
      const other = antiparticle(particle);
      if (other !== null) expect(antiparticle(other)).toEqual(particle);
    }
  });

  test("a baryon's has the opposite parity, a meson's the same", () => {
    expect(catalogueParticle("Xi-bar")).toMatchObject({
      parity: -1,
      charge: 1,
      strangeness: 2,
      mcNumber: -3312,
    });
    expect(catalogueParticle("K-")).toMatchObject({
      parity: -1,
      charge: -1,
      strangeness: -1,
      mcNumber: -321,
    });
  });
});
