import { InputError } from "../errors.js";
import type { Hadron } from "../hadrons/hadron.js";
import { findLightParticle } from "../hadrons/light-particles.js";
import { channelName } from "../model/channel-names.js";
import { requireIdentity } from "../require.js";
import { part } from "./mode-rows.js";
import type { FlavourAmplitude, ParentTable, Row, RowWave } from "./tables.js";

/**
 * Tables whose rows name K_S0 and K_L0 in place of K0 and K0bar.
 *
 * With CP|K0> = -|K0bar>, K_S0 = (K0 - K0bar)/sqrt2 and K_L0 = (K0 + K0bar)/sqrt2, without CP violation. One neutral kaon
 * of a strong or electromagnetic parent becomes either with half the width each. A pair K0 K0bar of spin J has C = (-1)^J:
 * K_S0 K_L0 alone for odd J, K_S0 K_S0 and K_L0 K_L0 with half each for even J. A weak parent may reach both flavours
 * beside the same particles: their amplitudes are projected before they are squared. Every projected row keeps the
 * flavour amplitudes it is made from.
 * Source: M. Gell-Mann and A. Pais, Phys. Rev. 97 (1955) 1387; I.I. Bigi and H. Yamamoto, Phys. Lett. B 349 (1995) 363
 * (provenance: memory).
 * @param file - the study, for messages
 * @throws InputError for two neutral kaons beside something else, or weak amplitudes whose phases are not known
 */
export function withShortAndLongKaons(tables: readonly ParentTable[], file: string): ParentTable[] {
  return tables.map((table) => ({ ...table, rows: projectedRows(table, file) }));
}

const isFlavour = ({ name }: Hadron) => name === "K0" || name === "K0bar";

function projectedRows({ parent, rows }: ParentTable, file: string): Row[] {
  const done = new Set<Row>();
  return rows.flatMap((row): Row[] => {
    if (done.has(row)) return [];
    const kaons = row.daughters.filter(isFlavour).length;
    if (kaons === 0) return [row];
    if (kaons === 2) return pairRows(parent.hadron, row, file);
    if (kaons > 2) refuseMany(row, file);
    const other = rows.find((candidate) => candidate !== row && isOtherFlavour(row, candidate));
    if (other !== undefined) done.add(other);
    return singleRows(parent.hadron.name, row, other, file);
  });
}

/** Whether two rows differ by K0 in place of K0bar alone. */
function isOtherFlavour(row: Row, other: Row): boolean {
  const plain = ({ daughters }: Row) =>
    daughters
      .map((hadron) => (isFlavour(hadron) ? "K" : hadron.name))
      .sort()
      .join(" ");
  const flavour = ({ daughters }: Row) =>
    daughters
      .filter(isFlavour)
      .map(({ name }) => name)
      .join();
  return plain(row) === plain(other) && flavour(other) !== "" && flavour(row) !== flavour(other);
}

function refuseMany(row: Row, file: string): never {
  throw new InputError(
    `${file}: ${row.id}: expected at most two neutral kaons, and two only by themselves, to write as K_S0 and K_L0. Name K_S0 and K_L0 in the mode, or take \`neutralKaons: flavour\`.`,
  );
}

/** K_S0 or K_L0 in place of each neutral kaon, in their order. */
function replaced(daughters: readonly Hadron[], names: readonly string[]): Hadron[] {
  let next = 0;
  return daughters.map((hadron) => (isFlavour(hadron) ? findLightParticle(names[next++]!)! : hadron));
}

function pairRows(parent: Hadron, row: Row, file: string): Row[] {
  const flavours = new Set(row.daughters.map(({ name }) => name));
  if (row.daughters.length !== 2 || flavours.size !== 2 || parent.antiparticle !== null)
    refuseMany(row, file);
  const cParity = parent.twoJ % 4 === 0 ? 1 : -1;
  requireIdentity(
    "withShortAndLongKaons",
    parent.cParity === null || parent.cParity === cParity,
    () => `${row.id}: a pair of kaons of spin ${parent.twoJ / 2} has C = ${cParity}`,
  );
  // |K0 K0bar> + C |K0bar K0>, normalised, is (|LL> - |SS>)/sqrt2 for C = 1 and (|SL> - |LS>)/sqrt2 for C = -1.
  const flavour = flavourOf(row, 1);
  if (cParity === -1) return [projectedRow(parent.name, row, ["K_S0", "K_L0"], 1, [flavour])];
  const half = { ...flavour, projection: -Math.SQRT1_2 };
  const twice = projectedRow(parent.name, row, ["K_S0", "K_S0"], 0.5, [half]);
  const other = projectedRow(parent.name, row, ["K_L0", "K_L0"], 0.5, [
    { ...half, projection: Math.SQRT1_2 },
  ]);
  return withParts(row.partsPerBillion, [twice, other]);
}

function singleRows(parent: string, row: Row, other: Row | undefined, file: string): Row[] {
  if (other === undefined) {
    const isAnti = row.daughters.some(({ name }) => name === "K0bar");
    const rows = ["K_S0", "K_L0"].map((name) => {
      const sign = isAnti && name === "K_S0" ? -1 : 1;
      return projectedRow(parent, row, [name], 0.5, [flavourOf(row, sign * Math.SQRT1_2)]);
    });
    return withParts(row.partsPerBillion, rows);
  }
  const [kaon, anti] = row.daughters.some(({ name }) => name === "K0") ? [row, other] : [other, row];
  const cosine = interference(kaon, anti, file);
  const widths = projectedWidths(kaon, anti, cosine, 1, 1);
  const total = widths[0] + widths[1];
  const sum: Row = {
    ...row,
    fraction: added(row.fraction, other.fraction),
    widthMeV: added(row.widthMeV, other.widthMeV),
    ...(row.integrated === undefined || other.integrated === undefined
      ? {}
      : { integrated: added(row.integrated, other.integrated) }),
    partsPerBillion: row.partsPerBillion + other.partsPerBillion,
    sources: [...new Set([...row.sources, ...other.sources])],
  };
  const rows = ([0, 1] as const).map((k) => {
    const [name, sign] = k === 0 ? ["K_S0", -1] : ["K_L0", 1];
    const flavours = [flavourOf(kaon, Math.SQRT1_2), flavourOf(anti, sign * Math.SQRT1_2)];
    const { replicaRatios: _, ...projected } = projectedRow(
      parent,
      sum,
      [name],
      widths[k]! / total,
      flavours,
    );
    const ratios = projectedRatios(kaon, anti, cosine, k);
    return ratios === undefined ? projected : { ...projected, replicaRatios: ratios };
  });
  return withParts(sum.partsPerBillion, rows);
}

/** Cosine of the phase between two flavour rows, whose amplitudes interfere in K_S0 and K_L0. */
function interference(kaon: Row, anti: Row, file: string): number {
  if (kaon.amplitude?.phaseRad === undefined || anti.amplitude?.phaseRad === undefined) {
    throw new InputError(
      `${file}: ${kaon.id} and ${anti.id}: expected the phases of both, since they interfere in K_S0 and K_L0. Give each mode its \`phase\`, or take \`neutralKaons: flavour\`.`,
    );
  }
  return Math.cos(kaon.amplitude.phaseRad - anti.amplitude.phaseRad);
}

/** Widths of K_S0 and K_L0 in the sum of two flavour rows, each scaled by a ratio. */
function projectedWidths(
  kaon: Row,
  anti: Row,
  cosine: number,
  kaonRatio: number,
  antiRatio: number,
): [number, number] {
  const [a, b] = [kaonRatio * kaon.widthMeV.value, antiRatio * anti.widthMeV.value];
  const mixed = Math.sqrt(a * b) * cosine;
  return [(a + b) / 2 - mixed, (a + b) / 2 + mixed];
}

/** What replicas of two flavour rows make of the row of K_S0 (0) or K_L0 (1); undefined where they leave it as it is. */
function projectedRatios(kaon: Row, anti: Row, cosine: number, k: 0 | 1): number[] | undefined {
  const replicas = kaon.replicaRatios ?? anti.replicaRatios;
  const own = projectedWidths(kaon, anti, cosine, 1, 1)[k];
  return replicas?.map((_, replica) => {
    const ratio = (row: Row) => row.replicaRatios?.[replica] ?? 1;
    const other = projectedWidths(kaon, anti, cosine, ratio(kaon), ratio(anti))[k];
    return own > 0 ? Math.fround(other / own) : 1;
  });
}

function added(a: Row["fraction"], b: Row["fraction"]): Row["fraction"] {
  return {
    value: a.value + b.value,
    plus: Math.hypot(a.plus, b.plus),
    minus: Math.hypot(a.minus, b.minus),
    breaking: Math.hypot(a.breaking, b.breaking),
    ...(a.branch === undefined ? {} : { branch: Math.hypot(a.branch, b.branch ?? 0) }),
    ...(a.model === undefined ? {} : { model: Math.hypot(a.model, b.model ?? 0) }),
  };
}

/** Amplitudes of a flavour row: of its waves, or the root of its width with the phase that is known of it, or 0. */
function flavourOf(row: Row, projection: number): FlavourAmplitude {
  const { id, waves, widthMeV, amplitude } = row;
  const size = Math.sqrt(widthMeV.value);
  const phase = amplitude?.phaseRad ?? 0;
  return {
    row: id,
    projection,
    re: waves.length > 0 ? waves.map(({ re }) => re) : [size * Math.cos(phase)],
    im: waves.length > 0 ? waves.map(({ im }) => im) : [size * Math.sin(phase)],
  };
}

/** A share of a row, with other kaons. */
function projectedRow(
  parent: string,
  row: Row,
  names: readonly string[],
  share: number,
  kaonFlavours: readonly FlavourAmplitude[],
): Row {
  const { grid, unadjusted, integrated, measurement, amplitude: _, ...rest } = row;
  const daughters = replaced(row.daughters, names);
  const identicalFactor = names.length === 2 && names[0] === names[1] ? 0.5 : row.identicalFactor;
  // Of one flavour the amplitude is the flavour's times its projection, with its sign.
  const root = Math.sqrt(share) * (kaonFlavours.length === 1 ? Math.sign(kaonFlavours[0]!.projection) : 1);
  const scaledWave = (wave: RowWave): RowWave => ({
    ...wave,
    re: root * wave.re,
    im: root * wave.im,
    flavourAmplitude: root * Math.sqrt(row.identicalFactor / identicalFactor) * wave.flavourAmplitude,
  });
  return {
    ...rest,
    id: channelName(
      parent,
      daughters.map(({ name }) => name),
    ),
    daughters,
    fraction: part(row.fraction, share),
    widthMeV: part(row.widthMeV, share),
    ...(integrated === undefined ? {} : { integrated: part(integrated, share) }),
    ...(measurement === undefined
      ? {}
      : { measurement: { ...measurement, share: share * measurement.share } }),
    identicalFactor,
    waves: row.waves.map(scaledWave),
    ...(grid === undefined
      ? {}
      : { grid: { ...grid, logWidths: grid.logWidths.map((y) => Math.fround(y + Math.log(share))) } }),
    ...(unadjusted === undefined
      ? {}
      : {
          unadjusted: {
            fraction: part(unadjusted.fraction, share),
            widthMeV: part(unadjusted.widthMeV, share),
          },
        }),
    kaonFlavours,
  };
}

/** Two rows with the parts of one divided between them, none lost. */
function withParts(parts: number, [first, second]: readonly Row[]): Row[] {
  const total = first!.widthMeV.value + second!.widthMeV.value;
  const share = total > 0 ? first!.widthMeV.value / total : 0.5;
  const own = Math.round(parts * share);
  return [
    { ...first!, partsPerBillion: own },
    { ...second!, partsPerBillion: parts - own },
  ];
}
