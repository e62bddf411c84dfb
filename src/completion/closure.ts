import type { Hadron } from "../hadrons/hadron.js";
import type { DaughterShapes } from "../model/daughter-shapes.js";
import type { Model } from "../model/model.js";
import { drawGrid } from "../widths/draw-mass.js";
import type { LineShape } from "../widths/line-shape.js";
import type { External, Life, MassShape, ParentTable } from "./tables.js";

/** hbar in MeV s and hbar c in MeV mm, exact in the SI since 2019. */
const HBAR_MEV_S = 6.582119569e-22;
const HBAR_C_MEV_MM = 1.973269804e-10;

/** A hadron whose c tau passes this, in mm, leaves the place where it was made before it decays. */
const FLIES_MM = 1;

/**
 * Every daughter that is no parent of the tables, in the order of the rows, with what becomes of it.
 *
 * Together with the parents they are all hadrons that the rows name. Unstable ones carry the line shape they were averaged
 * over; the antiparticle of a parent, which decays as that one does, with the parent's. What else decays at once is left
 * open: a generator must know its decays.
 */
export function closureOf(parents: readonly ParentTable[], model: Model, shapes: DaughterShapes): External[] {
  const known = new Map(parents.map(({ parent, lineShape }) => [parent.hadron.name, lineShape]));
  const implied = model.study.tables.antiparticles === "implied";
  const shaped = new Map<string, LineShape>();
  for (const { waves } of model.channels) {
    for (const placed of waves.flatMap(({ kinematics }) => kinematics.legs.slice(1))) {
      const shape = shapes.of(placed, "charge");
      if (shape !== undefined) shaped.set(placed.hadron.name, shape);
    }
  }
  const externals = new Map<string, External>();
  for (const hadron of parents.flatMap(({ rows }) => rows.flatMap(({ daughters }) => daughters))) {
    if (known.has(hadron.name) || externals.has(hadron.name)) continue;
    if (implied && hadron.antiparticle !== null && known.has(hadron.antiparticle)) {
      const lineShape = known.get(hadron.antiparticle);
      externals.set(hadron.name, {
        hadron,
        life: "conjugate",
        ...(lineShape === undefined ? {} : { lineShape }),
      });
      continue;
    }
    const shape = shaped.get(hadron.name) ?? shaped.get(hadron.antiparticle ?? "");
    externals.set(hadron.name, {
      hadron,
      life: lifeOf(hadron),
      ...(shape === undefined ? {} : { lineShape: massShape(shape) }),
    });
  }
  return [...externals.values()];
}

/** What becomes of a hadron by itself; K0 and K0bar fly on as K_S0 and K_L0. */
export function lifeOf({ name, widthMeV }: Hadron): Life {
  if (name === "K0" || name === "K0bar") return "flies";
  if (widthMeV === null || widthMeV === 0) return "stable";
  return HBAR_C_MEV_MM / widthMeV > FLIES_MM ? "flies" : "decays";
}

/** Mean life hbar/Gamma in seconds; null for what has no width here. */
export function lifetimeSeconds({ widthMeV }: Pick<Hadron, "widthMeV">): number | null {
  return widthMeV === null || widthMeV === 0 ? null : HBAR_MEV_S / widthMeV;
}

function massShape(shape: LineShape): MassShape {
  return { windowMeV: shape.windowMeV, normalisation: shape.normalisation, draw: drawGrid(shape) };
}
