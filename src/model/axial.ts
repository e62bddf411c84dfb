import { antisymmetricCouplingOfF, hasFAndD } from "../couplings/f-and-d.js";
import { FormMaker } from "../couplings/form.js";
import { STRONG } from "../couplings/operator.js";
import {
  divideRoots,
  multiplyRoots,
  rootToNumber,
  type SignedRoot,
  ZERO_ROOT,
} from "../exact/signed-root.js";
import { canonicalName } from "../hadrons/catalogue.js";
import type { Hadron } from "../hadrons/hadron.js";
import { refuse } from "../require.js";
import { states } from "../su3/state.js";
import type { Decay } from "./model.js";

const TRANSITION = /^\s*(\S+)\s*->\s*(\S+)\s*$/;

/**
 * g1/f1 of a semileptonic transition between two members of one baryon octet, as a row over the couplings.
 *
 * Both currents are octets with the meson's place in 8 -> 8 x 8. The vector current is pure F with F = 1 (it is
 * conserved), so g1/f1 = (c_S g_S + c_A g_A)/(sqrt(12) c_A) = F + D (c_D/c_F).
 * Source: N. Cabibbo, Phys. Rev. Lett. 10 (1963) 531. Provenance: memory.
 * @throws InputError where the vector current vanishes, or there is no decay that defines F and D for these baryons
 */
export function axialRow(text: string, decays: readonly Decay[]): number[] {
  const match = TRANSITION.exec(text);
  if (match === null) refuse("transition", "two baryons such as `n -> p`", text);
  const names = [match[1]!, match[2]!].map(canonicalName);
  const hadrons = (decay: Decay) => decay.from.members.flatMap((member) => member.hadrons);
  const decay = decays.find(
    (d) =>
      hasFAndD({ ...d, operator: STRONG }) &&
      d.from.id === d.to[0].id &&
      names.every((name) => hadrons(d).some((h) => h.name === name)),
  );
  if (decay === undefined) {
    const mend = "Declare one, e.g. from baryon-octet to [baryon-octet, pseudoscalar-octet] with L: 1.";
    refuse(
      "transition",
      "a decay of a baryon octet into itself and a meson octet, which defines F and D",
      text,
      mend,
    );
  }
  const [initial, final] = names.map((name) => pureState(hadrons(decay).find((h) => h.name === name)!));
  const meson = states(decay.to[1].irrep).filter(
    ({ threeY, twoI3 }) =>
      threeY === initial!.threeY - final!.threeY && twoI3 === initial!.twoI3 - final!.twoI3,
  );
  const maker = new FormMaker({ ...decay, operator: STRONG }, decay.reduced);
  for (const state of meson) {
    const { terms } = maker.chargeForm(initial!, [final!, state]);
    const coefficient = (index: number): SignedRoot =>
      terms.find(({ reduced }) => reduced === index)?.c ?? ZERO_ROOT;
    const vector = multiplyRoots(antisymmetricCouplingOfF(), coefficient(1));
    if (vector.sign === 0) continue;
    const [s, a] = [0, 1].map((index) => rootToNumber(divideRoots(coefficient(index), vector)));
    return decay.couplingRows[0]!.map((d, k) => s! * d + a! * decay.couplingRows[1]![k]!);
  }
  return refuse(
    "transition",
    "one whose vector current does not vanish",
    text,
    "g1/f1 is not defined for it.",
  );
}

function pureState({ content }: Hadron) {
  return content[0]!.leg.state;
}
