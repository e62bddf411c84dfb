/** A channel as a study writes it: `N(1675) -> N pi`, or one wave of it: `N(1520) -> Delta pi L=0`. */
export interface WrittenChannel {
  readonly parent: string;
  readonly daughters: readonly [string, string];
  readonly L?: number;
}

const CHANNEL = /^\s*(\S+)\s*->\s*(\S+)\s+(\S+)(?:\s+L=(\d+))?\s*$/;

/** The names in a written channel, or undefined if the text is not one. */
export function parseChannel(text: string): WrittenChannel | undefined {
  const match = CHANNEL.exec(text);
  if (match === null) return undefined;
  const names = { parent: match[1]!, daughters: [match[2]!, match[3]!] as const };
  return match[4] === undefined ? names : { ...names, L: Number(match[4]) };
}

/** The one way a channel is printed. */
export function channelName(parent: string, daughters: readonly string[]): string {
  return `${parent} -> ${daughters.join(" ")}`;
}
