/**
 * The text of the starter study that `couplet new` writes. It runs as it is; every number in it is invented.
 *
 * @param title - the study's title
 * @param schemaFile - name of the JSON Schema beside it
 */
export function starterStudy(title: string, schemaFile: string): string {
  return `# yaml-language-server: $schema=${schemaFile}
#
# A study for Couplet, to be made your own. EVERY NUMBER IN IT IS INVENTED: put yours in their place.
#
#   couplet fit ${title}.yaml              the couplings, F and D, every minimum, pulls
#   couplet tables ${title}.yaml -o OUT    complete decay tables of all charge states
#
# An editor that knows YAML schemas completes and explains the keys, by the first line.
couplet: 1
title: ${JSON.stringify(`${title} (starter study, every number invented)`)}

# Multiplets of yours. Ground states such as baryon-octet, baryon-decuplet and pseudoscalar-octet are in the catalogue.
multiplets:
  excited:
    irrep: 8              # or 10, 10bar, 27, or p,q where a dimension means several: 2,1
    spinParity: 5/2+
    members:              # one for each isospin multiplet; leave out what your simulation does not need
      - { name: N(1660), place: N, mass: 1660 +- 10 MeV, width: 118 +- 15 MeV }
      - { name: Lambda(1790), place: Lambda, mass: 1.790 GeV, width: 74 +- 10 MeV }
      - { name: Sigma(1860), place: Sigma, mass: 1860 +- 12 MeV, width: 88 +- 14 MeV }
      # No measured width: the sum of the predicted partial widths.
      - { name: Xi(1970), place: Xi, mass: 1970 +- 15 MeV, width: sum }

# Every channel of a decay between multiplets shares its couplings: two for an octet into two octets, F and D.
decays:
  - from: excited
    to: [baryon-octet, pseudoscalar-octet]   # baryon first, meson second: the order fixes the sign of F
    L: 3                                     # the orbital angular momentum that spin and parity allow
    model: a                                 # how the width grows with the momentum; see the README

# What has been measured. It fixes the couplings, and stands in the tables as it is.
# A value is written 40 +- 6 MeV, 40 +7 -5 MeV, 0.40 +- 0.06 or 40 +- 6 %; isospin multiplets stand for all charges.
measurements:
  - { fraction: N(1660) -> N pi, value: 48 +- 5 %, source: invented }
  - { fraction: Lambda(1790) -> N Kbar, value: 0.31 +- 0.05, source: invented }
  - { fraction: Lambda(1790) -> Sigma pi, value: 0.18 +- 0.05, source: invented }
  - { width: Sigma(1860) -> N Kbar, value: 9 +4 -3 MeV, source: invented }
  # A ratio enters the fit only.
  - { ratio: [Sigma(1860) -> Sigma pi, Sigma(1860) -> N Kbar], value: 2.2 +- 0.9, source: invented }

# Where the data allow several solutions: refuse (the default), best, or each (one file for each).
fit: { mirrors: refuse }

# Breaking of the symmetry in amplitude, as a part of the coupling strength |g|: it gives predicted rows their second error.
# 0.2 is 20 % of |g|; in a channel that takes a quarter of |g|^2 that is 40 % of the amplitude.
# With \`widthModels: compared\` rows also quote the error from the width model; the fit is then made once for each.
tables: { breaking: 0.2, widthModels: own }
`;
}
