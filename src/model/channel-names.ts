/** A channel as a study writes it: `N(1675) -> N pi`. */
export interface WrittenChannel {
  readonly parent: string;
  readonly daughters: readonly [string, string];
}

const CHANNEL = /^\s*(\S+)\s*->\s*(\S+)\s+(\S+)\s*$/;

/** The names in a written channel, or undefined if the text is not one. */
export function parseChannel(text: string): WrittenChannel | undefined {
  const match = CHANNEL.exec(text);
  return match === null ? undefined : { parent: match[1]!, daughters: [match[2]!, match[3]!] };
}

/** The one way a channel is printed. */
export function channelName(parent: string, daughters: readonly string[]): string {
  return `${parent} -> ${daughters.join(" ")}`;
}
