"""Partial widths and fractions of a parent at any mass, from the rows of a decay table of Couplet.

The partial width of a row at the parent's mass m is the sum over its waves of

    (re^2 + im^2) K(m)/K(m0)                    where K(m0) > 0, m0 the nominal mass in the table, or else
    identical_factor flavour_amplitude^2 K(m)   where the row is closed at m0, so that re = im = 0,

with K the closed form of the wave's width model at the masses of the daughters in the table. So at m0 it is the row's
width, measured or predicted; a measured row keeps its measured value and takes its shape from the model. For a
predicted row both lines are the same number. Below the sum of the daughters' masses it is 0.

A row that is averaged over the line shapes of its daughters (flag `folded`), or has a width at m0 where K(m0) = 0, is
evaluated from its grid, by the rule that the schema states and to its accuracy of 1e-4. A row without waves grows with
its `power` of the distance from its threshold; without a power it is constant above its threshold, since nothing is
known of its shape. A remainder is constant above the parent's lowest threshold, or everywhere if that lies above m0. All
masses are in MeV.
"""

import bisect
import math

from couplet.v1 import decays_pb2

# hbar c in MeV fm; fixed by the SI of 2019, here to ten digits.
HBAR_C = 197.3269804
LARGEST_L = 12

# Names and units of the options of each width model, in the order its function takes them.
OPTIONS = {
    "a": [("n", "1"), ("referenceMomentumMeV", "MeV"), ("referenceMassMeV", "MeV")],
    "b": [("rangeMeV", "MeV"), ("nucleonMassMeV", "MeV")],
    "c": [("radiusFm", "fm"), ("referenceMassMeV", "MeV")],
    "d": [("scaleMeV", "MeV"), ("derivativeForm", "1")],
    "e": [],
}
# Options that joined their model later, with the value that a table without them means.
ABSENT = {("derivativeForm", "1"): 0}


class Damaged(Exception):
    """The file is one of ours, and damaged or too new for this reader."""


def breakup_momentum(parent, first, second):
    """Momentum of either daughter in the parent's rest frame, in MeV; 0 at and below threshold.

    Source: S. Navas et al. (Particle Data Group), Phys. Rev. D 110, 030001 (2024), review "Kinematics".
    """
    heavy, light = max(first, second), min(first, second)
    # The heavier daughter is subtracted first: near threshold no digit is lost then.
    excess = parent - heavy - light
    if not excess > 0:
        return 0.0
    difference = heavy - light
    other = (parent - difference) * (parent + difference)
    return math.sqrt(excess * (parent + heavy + light)) * (math.sqrt(other) / (2 * parent))


# Each function returns K(parent, first, second, momentum) in MeV, for a momentum > 0.


def power_law(l, n, q_ref, m_ref):
    """Model a: K = q_ref (q/q_ref)^(2L+1) (M_ref/M)^n."""
    return lambda parent, first, second, q: q_ref * (q / q_ref) ** (2 * l + 1) * (m_ref / parent) ** n


def range_model(l, cutoff, nucleon):
    """Model b: K = (q^2/(q^2 + X^2))^L q M_N/M."""
    return lambda parent, first, second, q: q * (nucleon / parent) * (1 + (cutoff / q) ** 2) ** -l


def barrier_model(l, radius, m_ref):
    """Model c: K = F_L^2(R q) q M_ref/M, F_L^2 = z^L/P_L(z), z = (R q/hbar c)^2."""

    def k(parent, first, second, q):
        z = (radius * q / HBAR_C) ** 2
        return q * (m_ref / parent) * (z**l / barrier_polynomial(l, z))

    return k


def barrier_polynomial(l, z):
    """|theta_L(i sqrt z)|^2 with the reverse Bessel polynomials theta_L: 1, 1 + z, 9 + 3z + z^2, ..."""
    if l == 0:
        return 1.0
    previous, theta = 1, complex(1, math.sqrt(z))
    for order in range(2, l + 1):
        previous, theta = theta, (2 * order - 1) * theta - z * previous
    return theta.real**2 + theta.imag**2


def effective_baryon(l, scale, derivative_form, spins):
    """Model d: K = n!/((2n+1)!! 4 pi) q (q/m_s)^2n (E +- m)/M, J = n + 1/2 into 1/2 and 0, + for L = n, - for n + 1.

    With the derivative form times ((M -+ m)/m_s)^2 for J = 1/2, with no effect for higher spins.
    """
    parent_spin, first_spin, second_spin = spins
    if parent_spin is None or parent_spin % 2 != 1 or (first_spin, second_spin) != (1, 0):
        return None
    n = parent_spin // 2
    if l not in (n, n + 1):
        return None
    prefactor = 1 / (4 * math.pi)
    for step in range(1, n + 1):
        prefactor *= step / (2 * step + 1)

    def k(parent, first, second, q):
        total = math.hypot(first, q) + first
        # E - m without the cancellation of the plain difference.
        energy = total if l == n else q / total * q
        factor = prefactor * q * (q / scale) ** (2 * n) * (energy / parent)
        if n > 0 or derivative_form == 0:
            return factor
        return factor * (((parent - first) if l == 0 else (parent + first)) / scale) ** 2

    return k


def effective_meson(l, spins):
    """Model e: effective Lagrangians of mesons; the spins and L choose the coupling."""
    if None in spins:
        return None
    first_is_vector = spins[1] == 2

    def axial_to_vector(parent, first, second, q):
        vector = first if first_is_vector else second
        return q * (1 + (q / vector) ** 2 / 3) / (8 * math.pi * parent**2)

    couplings = {
        # Vector to two spinless: A = g eps.(p1 - p2).
        (2, 0, 0, 1): lambda parent, first, second, q: q / (6 * math.pi) * (q / parent) ** 2,
        # Tensor to two spinless: A = g eps_mn q^m q^n, q = (p1 - p2)/2.
        (4, 0, 0, 2): lambda parent, first, second, q: q**3 / (60 * math.pi) * (q / parent) ** 2,
        # Vector to vector or photon and spinless, antisymmetric tensor.
        (2, 2, 0, 1): lambda parent, first, second, q: q**3 / (12 * math.pi),
        # Scalar to two spinless: A = g.
        (0, 0, 0, 0): lambda parent, first, second, q: q / (8 * math.pi * parent**2),
        # Axial vector to massive vector and spinless: A = g eps.eps'.
        (2, 2, 0, 0): axial_to_vector,
        # Spinless to two vectors or photons, antisymmetric tensor.
        (0, 2, 2, 1): lambda parent, first, second, q: q**3 / (4 * math.pi),
    }
    return couplings.get((spins[0], max(spins[1:]), min(spins[1:]), l))


def refuse(row_id, expected, got):
    raise Damaged(f"{row_id}: expected {expected}, got {got}. Read the table with a newer reader.")


def width_model(wave, row_id, spins):
    """K of a wave; raises Damaged for models, options and vertices this reader does not know.

    spins: twice the spins of parent, first and second daughter, None where they are not known.
    """
    if wave.two_l % 2 or wave.two_l > 2 * LARGEST_L:
        refuse(row_id, f"an even 2L up to {2 * LARGEST_L}", wave.two_l)
    l = wave.two_l // 2
    if wave.model not in OPTIONS:
        refuse(row_id, "a width model among " + ", ".join(OPTIONS), f'"{wave.model}"')
    wanted = OPTIONS[wave.model]
    given = {(option.name, option.unit): option.value for option in wave.options if math.isfinite(option.value)}
    required = {pair for pair in wanted if pair not in ABSENT}
    if not required <= set(given) <= set(wanted) or len(wave.options) != len(given):
        listed = lambda texts: "[" + ", ".join(texts) + "]"
        expected = listed(f"{name} in {unit}" + " or none" * ((name, unit) in ABSENT) for name, unit in wanted)
        got = listed(f"{option.name} in {option.unit}" for option in wave.options)
        refuse(row_id, f"width model {wave.model} with the options {expected}", got)
    values = [given[pair] if pair in given else ABSENT[pair] for pair in wanted]
    if wave.model == "a":
        return power_law(l, *values)
    if wave.model == "b":
        return range_model(l, *values)
    if wave.model == "c":
        return barrier_model(l, *values)
    if wave.model == "d":
        if values[1] not in (0, 1):
            refuse(row_id, "derivativeForm 0 or 1 of width model d", f"{values[1]:g}")
        k = effective_baryon(l, *values, spins)
        vertex = "spin n + 1/2 into 1/2 and 0 with L = n or n + 1 for width model d"
        return k or refuse(row_id, vertex, "another vertex")
    return effective_meson(l, spins) or refuse(row_id, "spins and L that width model e has a coupling for", "others")


def grid_width(grid, row_id):
    """Width of a grid against mass: C. Hermite's cubic in ln width against ln distance, the threshold law below it."""
    x, y, s, threshold = list(grid.distances), list(grid.log_widths), list(grid.slopes), grid.threshold
    ascending = all(a < b for a, b in zip(x, x[1:]))
    if not (len(x) >= 2 and len(y) == len(s) == len(x) and ascending and x[0] > 0 and math.isfinite(threshold)):
        raise Damaged(f"{row_id}: expected a grid of two points or more in ascending order, got another")
    t = [math.log(distance) for distance in x]

    def width(mass):
        distance = mass - threshold
        if distance <= 0:
            return 0.0
        if not distance <= x[-1]:
            raise ValueError("mass: expected one up to the end of a row's grid, got more")
        at = math.log(distance)
        if distance < x[0]:
            return math.exp(y[0] + s[0] * (at - t[0]))
        k = bisect.bisect_right(x, distance, 1, len(x) - 1) - 1
        h = t[k + 1] - t[k]
        u, d, a, b = (at - t[k]) / h, y[k + 1] - y[k], h * s[k], h * s[k + 1]
        return math.exp(y[k] + u * (a + u * (3 * d - 2 * a - b + u * (a + b - 2 * d))))

    return width


class ParentWidths:
    """Partial widths and fractions of one parent at any mass, made ready once.

    Raises Damaged for a width model, an option or a vertex this reader does not know.
    """

    def __init__(self, tables, parent):
        hadrons = {hadron.name: hadron for hadron in tables.externals}
        hadrons.update((p.hadron.name, p.hadron) for p in tables.parents)
        lowest = min((_lowest_mass(row) for row in parent.rows if row.daughters), default=math.inf)
        self._rows = [_ready_row(hadrons, parent, row, lowest) for row in parent.rows]

    def widths(self, mass):
        """Partial widths of all rows, in MeV, in their order; mass in MeV.

        Raises ValueError for a mass that is not a finite number > 0, past the end of a grid, or so large that a width
        overflows.
        """
        if not (math.isfinite(mass) and mass > 0):
            raise ValueError("mass: expected a finite number > 0 in MeV")
        try:
            widths = [row(mass) for row in self._rows]
        except ArithmeticError:
            widths = [math.inf]
        if not all(math.isfinite(width) for width in widths):
            raise ValueError("mass: expected one at which widths are finite, got more")
        return widths

    def total(self, mass):
        """Total width in MeV: the sum of all rows."""
        return sum(self.widths(mass))

    def fractions(self, mass):
        """Fractions of all rows; they add up to 1, or are all 0 at a mass where every row is closed."""
        widths = self.widths(mass)
        total = sum(widths)
        return [width / total for width in widths] if total > 0 else widths


def _takes_grid(row):
    return row.HasField("grid") and decays_pb2.FLAG_FOLDED in row.flags


def _lowest_mass(row):
    """Mass of the parent where a row with daughters opens."""
    return row.grid.threshold if _takes_grid(row) else row.threshold


def _ready_row(hadrons, parent, row, lowest):
    """A function of the mass that gives the row's width; lowest: the parent's lowest threshold."""
    if _takes_grid(row):
        return grid_width(row.grid, row.id)
    if not row.waves:
        if not (row.width.HasField("value") and row.HasField("threshold")):
            raise Damaged(f"{row.id}: expected a row without waves to have a width and a threshold, got none")
        if row.HasField("power"):
            return _power_of_distance(row, parent.hadron.mass)
        # A remainder of a parent below its lowest threshold is all there is of its width.
        takes_lowest = not row.daughters and lowest < parent.hadron.mass
        constant, threshold = row.width.value, lowest if takes_lowest else row.threshold
        return lambda mass: constant if mass > threshold else 0.0
    nominal = parent.hadron.mass
    if len(row.daughters) != 2 or not nominal > 0:
        raise Damaged(f"{row.id}: expected two daughters and a parent's mass > 0 of a row with waves, got others")
    first, second = (daughter_hadron(hadrons, row, daughter) for daughter in row.daughters)
    spins = [hadron.two_j if hadron.HasField("two_j") else None for hadron in (parent.hadron, first, second)]
    m1, m2 = first.mass, second.mass
    q0 = breakup_momentum(nominal, m1, m2)
    waves = []
    for wave in row.waves:
        k = width_model(wave, row.id, spins)
        try:
            at_nominal = k(nominal, m1, m2, q0) if q0 > 0 else 0.0
            width = wave.re**2 + wave.im**2
            if at_nominal == 0 and width > 0:
                if row.HasField("grid"):
                    return grid_width(row.grid, row.id)
                refuse(row.id, "a grid, since the nominal masses forbid the decay", "a width without one")
            if at_nominal > 0:
                scale = width / at_nominal
            else:
                scale = row.identical_factor * wave.flavour_amplitude**2
        except ArithmeticError:
            scale = math.nan
        if not math.isfinite(scale):
            raise Damaged(f"{row.id}: expected finite amplitudes, got others")
        waves.append((scale, k))

    def width(mass):
        q = breakup_momentum(mass, m1, m2)
        return sum(scale * k(mass, m1, m2, q) for scale, k in waves) if q > 0 else 0.0

    return width


def _power_of_distance(row, nominal):
    """The law of a row outside the symmetry: width ((m - threshold)/(m0 - threshold))^power."""
    width, threshold, power = row.width.value, row.threshold, row.power
    distance = nominal - threshold
    if not (math.isfinite(width) and width >= 0 and distance > 0 and power >= 0):
        raise Damaged(f"{row.id}: expected a width, a threshold below the parent's mass and a power >= 0, got others")
    return lambda mass: width * ((mass - threshold) / distance) ** power if mass > threshold else 0.0


def daughter_hadron(hadrons, row, daughter):
    """The hadron of a row's daughter; Damaged where the table lacks it or its mass."""
    hadron = hadrons.get(daughter.name)
    if hadron is None or not hadron.HasField("mass") or not 0 <= hadron.mass < math.inf:
        raise Damaged(f"{row.id}: expected {daughter.name} among the hadrons of the table with its mass, got none")
    return hadron
