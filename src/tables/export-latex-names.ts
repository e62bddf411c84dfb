const GREEK = [
  ..."alpha beta gamma delta epsilon zeta eta theta iota kappa lambda mu nu xi pi rho sigma tau phi chi psi omega".split(
    " ",
  ),
  ..."Gamma Delta Theta Lambda Xi Pi Sigma Upsilon Phi Psi Omega".split(" "),
];

/** Stem, index, stars and primes, mass in brackets, charge: `K2*(1430)+`, `chi_c0(1P)`, `f2'(1525)`, `D_s+`. */
const NAME =
  /^(?<stem>J\/psi|[A-Za-z]+?)(?:_(?<index>[A-Za-z]+\d*?)|(?<digits>\d+)(?=[*'(]))?(?<stars>\**)(?<primes>'*)(?<mass>\([^()]*\))?(?<charge>\++|-+|0)?$/;

/** Characters that LaTeX reads as commands and that a backslash does not make ordinary. */
const SPECIAL: Readonly<Record<string, string>> = { "\\": "\\backslash ", "~": "\\sim ", "^": "\\wedge " };

/**
 * A hadron's name for math mode, e.g. `\Sigma(1385)^{+}` for `Sigma(1385)+`, `\overline{K^{0}}` for `K0bar`; a name of
 * another form stands upright as it is.
 */
export function latexHadron(name: string): string {
  if (name.length > 3 && name.endsWith("bar")) return `\\overline{${latexHadron(name.slice(0, -3))}}`;
  const groups = NAME.exec(name)?.groups;
  if (groups === undefined) return `\\mathrm{${latexEscaped(name)}}`;
  const { stem, index, digits, stars, primes, mass, charge } = groups;
  const below = digits ?? index;
  const symbol = `${letter(stem!)}${below === undefined ? "" : `_{${below}}`}`;
  const marks = `${"*".repeat(stars!.length)}${"\\prime".repeat(primes!.length)}`;
  // Behind a mass the charge has a place of its own; a double superscript would be an error.
  if (mass === undefined) return `${symbol}${superscript(marks + (charge ?? ""))}`;
  return `${symbol}${superscript(marks)}${mass}${superscript(charge ?? "")}`;
}

/** Text that LaTeX prints as it stands, in math mode. */
export function latexEscaped(text: string): string {
  return text.replace(/[\\~^#$%&_{}]/g, (c) => SPECIAL[c] ?? `\\${c}`);
}

function superscript(text: string): string {
  return text === "" ? "" : `^{${text}}`;
}

function letter(stem: string): string {
  if (stem === "J/psi") return "J/\\psi";
  if (GREEK.includes(stem)) return `\\${stem}`;
  return stem.length === 1 ? stem : `\\mathrm{${stem}}`;
}
