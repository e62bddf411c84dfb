import { formatRoot, rootToNumber, type SignedRoot, signedRoot } from "../exact/signed-root.js";
import type { couplet } from "../gen/couplet.js";

/** An exact number as a message, with the double nearest to it. */
export function exactMessage(root: SignedRoot): couplet.v1.Exact.$Properties {
  return {
    sign: root.sign,
    numerator: String(root.num),
    denominator: String(root.den),
    value: rootToNumber(root),
  };
}

/** The exact number in a message; absent fields count as zero. */
export function rootOfExact(exact: couplet.v1.Exact.$Properties | null | undefined): SignedRoot {
  return signedRoot(exact?.sign ?? 0, BigInt(exact?.numerator ?? 0), BigInt(exact?.denominator || 1));
}

/** The exact number in a message as text, e.g. `-sqrt(3/20)`. */
export function formatExact(exact: couplet.v1.Exact.$Properties | null | undefined): string {
  return formatRoot(rootOfExact(exact));
}
