"""Draws whole decay cascades from a decay table of Couplet: rows and masses of every generation.

A particle's row is drawn with the partial widths at its mass, of the rows whose daughters can be light enough, and never
drawn again. The masses of a row's daughters are drawn jointly with chance

    rho(w1) ... rho(wn) K(M, w1, ..., wn)    where w1 + ... + wn < M,

rho the daughters' line shapes in the table, K the sum over the row's waves of strength times width model at these masses, or
(M - w1 - ... - wn)^power for a row without waves (power 0 if it has none). A daughter that has no line shape or is narrower
than 1 MeV has its nominal mass, as for the widths in the table. Each daughter then decays at the mass drawn.

Only masses are drawn. Momenta, and whatever correlates them, are the generator's; flat phase space fits every decay, since
the daughters' masses always add up to less than the mother's.

    PYTHONPATH=OUT:src/clients/python /usr/bin/python3 couplet_cascades.py FILE --parent 'f2(1270)' --cascades 1000
"""

import argparse
import collections
import dataclasses
import math
import random
import sys

from couplet_decays import Damaged, NotOurs, chance_up_to, check_points, mass_at, read_tables
from couplet_widths import ParentWidths, breakup_momentum, daughter_hadron, width_model

# A daughter narrower than this, in MeV, has its nominal mass.
NARROW = 1.0
# Tries after which a draw of masses takes the one that came nearest; the least efficient channels need thousands.
MOST_TRIES = 100_000
# No table of real hadrons comes near this.
MOST_PARTICLES = 1000


@dataclasses.dataclass
class Particle:
    """One particle of a cascade.

    end: "decayed"; "left" where the table has no rows for it (stable, flies on, or left to the generator); "undecayable"
    where the row drawn has no daughters (a remainder); "closed" where no row is open at its mass.
    """

    name: str
    # MeV.
    mass: float
    # Place of the mother in the list; None for the first particle.
    mother: int | None = None
    end: str = "left"
    # The row drawn, a message; None unless it decayed or is undecayable.
    row: object = None
    # True where the row is one of the antiparticle: every daughter is the antiparticle of the row's.
    conjugate: bool = False
    # Places of the daughters in the list, in the order of the row.
    daughters: range = range(0)


class Cascades:
    """Draws whole cascades from one table, made ready once.

    Raises Damaged for a row this reader cannot evaluate, or one with a single daughter.
    """

    def __init__(self, tables):
        hadrons = {hadron.name: hadron for hadron in tables.externals}
        hadrons.update((parent.hadron.name, parent.hadron) for parent in tables.parents)
        # The names both ways round; what a hadron of the table says of itself counts first.
        self._antiparticles = {h.antiparticle: h.name for h in hadrons.values() if h.HasField("antiparticle")}
        self._antiparticles.update((h.name, h.antiparticle) for h in hadrons.values() if h.HasField("antiparticle"))
        self._implied = tables.header.policies.antiparticles == "implied"
        self._parents = {
            parent.hadron.name: _ReadyParent(
                _mass_source(parent.hadron),
                list(parent.rows),
                [_JointMasses(hadrons, parent, row) for row in parent.rows],
                ParentWidths(tables, parent),
            )
            for parent in tables.parents
        }

    def draw(self, name, rng, mass=None):
        """A cascade down to particles without rows: a list of Particle in which every mother comes before her daughters.

        name: a parent of the table, or the antiparticle of one if the table says that these are implied. rng: a
        random.Random. mass: of the first particle in MeV; drawn from its line shape if not given, nominal if it has none.
        Random numbers are used in this order: one for that mass, if it is drawn; then for every particle with rows, in
        the order of the list, one for the row and those for its daughters' masses.

        Raises NotOurs for a name without rows, ValueError for a mass that is not a finite number > 0 or past the end of a
        grid, Damaged for a table whose decays do not end.
        """
        first, _ = self._rows_of(name)
        if first is None:
            raise NotOurs(f'no rows for "{name}" in this table; there are: ' + ", ".join(self._parents))
        if mass is None:
            mass = mass_at(first.source, rng.random()) if isinstance(first.source, _Shape) else first.source
        elif not (math.isfinite(mass) and mass > 0):
            raise ValueError("mass: expected a finite number > 0 in MeV")
        cascade = [Particle(name, mass)]
        for place, particle in enumerate(cascade):
            ready, conjugate = self._rows_of(particle.name)
            if ready is None:
                continue
            particle.conjugate = conjugate
            drawn = ready.draw_row(particle.mass, rng.random())
            if drawn is None:
                particle.end = "closed"
                continue
            particle.row = ready.rows[drawn]
            if not particle.row.daughters:
                particle.end = "undecayable"
                continue
            particle.end = "decayed"
            masses = ready.joint[drawn].draw(particle.mass, rng)
            particle.daughters = range(len(cascade), len(cascade) + len(masses))
            for daughter, mass in zip(particle.row.daughters, masses):
                daughter_name = self.antiparticle(daughter.name) if conjugate else daughter.name
                cascade.append(Particle(daughter_name, mass, place))
            if len(cascade) > MOST_PARTICLES:
                raise Damaged(f"{name}: expected decays that end, got {MOST_PARTICLES} particles")
        return cascade

    def antiparticle(self, name):
        """The name of the antiparticle of a hadron in the tables; its own name if it is its own."""
        return self._antiparticles.get(name, name)

    def _rows_of(self, name):
        """What decays like a hadron, and whether that is its antiparticle; None if there are no rows."""
        own = self._parents.get(name)
        if own is not None or not self._implied:
            return own, False
        return self._parents.get(self.antiparticle(name)), True


# A line shape in plain Python, which is faster than the message.
_Shape = collections.namedtuple("_Shape", ["low", "distances", "cumulative", "power"])


def _mass_source(hadron):
    """The line shape of a hadron, or its nominal mass if it has none."""
    if not hadron.HasField("line_shape"):
        return hadron.mass
    shape = hadron.line_shape
    check_points(shape)
    if not shape.low >= 0:
        raise Damaged(f"{hadron.name}: line shape: expected a lowest mass >= 0, got another")
    return _Shape(shape.low, list(shape.distances), list(shape.cumulative), shape.power)


@dataclasses.dataclass
class _ReadyParent:
    source: object
    rows: list
    joint: list
    widths: ParentWidths

    def draw_row(self, mass, u):
        """A row by its partial width at a mass, of those whose daughters can be light enough; None if all are closed."""
        # A mass from the very end of a line shape may be 0.
        widths = self.widths.widths(mass) if mass > 0 else []
        opened = [width if joint.lowest < mass else 0.0 for width, joint in zip(widths, self.joint)]
        wanted, total, drawn = u * _sum(opened), 0.0, None
        for row, width in enumerate(opened):
            if width == 0:
                continue
            total += width
            drawn = row
            if wanted < total:
                break
        return drawn


class _JointMasses:
    """One row made ready for drawing the masses of its daughters."""

    def __init__(self, hadrons, parent, row):
        if len(row.daughters) == 1:
            raise Damaged(f"{row.id}: expected two daughters or more, got 1")
        daughters = [daughter_hadron(hadrons, row, daughter) for daughter in row.daughters]
        self._sources = [
            hadron.mass if hadron.HasField("width") and hadron.width < NARROW else _mass_source(hadron)
            for hadron in daughters
        ]
        self._low = [source.low if isinstance(source, _Shape) else source for source in self._sources]
        self.lowest = _sum(self._low)
        self._power = row.power if row.HasField("power") else 0.0
        self._waves = []
        if len(daughters) == 2 and row.waves:
            spins = [h.two_j if h.HasField("two_j") else None for h in (parent.hadron, *daughters)]
            strengths = [_strength(row, wave) for wave in row.waves]
            total = sum(strengths)
            if not (total > 0 and math.isfinite(total)):
                # Without strengths the waves count alike.
                strengths = [1.0] * len(strengths)
            models = [width_model(wave, row.id, spins) for wave in row.waves]
            self._waves = list(zip(strengths, models))

    def _factor(self, parent, masses):
        """What the chance of these masses is weighted with at a mass of the parent."""
        if not self._waves:
            return (parent - _sum(masses)) ** self._power
        momentum = breakup_momentum(parent, *masses)
        return sum(strength * k(parent, *masses, momentum) for strength, k in self._waves) if momentum > 0 else 0.0

    def draw(self, parent, rng):
        """Masses of the daughters at a mass of the parent, in the order of the row; their sum is below it.

        By rejection: each mass from the part of its line shape that the others leave at their lowest masses; those that do
        not fit are thrown away; one more number v accepts the others if v K(lowest masses) < K, which is largest there in
        every model. (Model d in an S wave may pass that bound by less than 1 %.) After MOST_TRIES the ones with the largest
        K/v are taken: they are accepted first if the bound is lowered step by step, so that their chance is the right one
        but for terms of order 1/MOST_TRIES.
        """
        if not any(isinstance(source, _Shape) for source in self._sources):
            return self._low
        part = []
        for place, source in enumerate(self._sources):
            others = _sum(low for k, low in enumerate(self._low) if k != place)
            part.append(chance_up_to(source, parent - others) if isinstance(source, _Shape) else 0.0)
        bound = self._factor(parent, self._low)
        nearest, ratio = self._low, 0.0
        for _ in range(MOST_TRIES):
            masses = [
                mass_at(source, rng.random() * share) if isinstance(source, _Shape) else source
                for source, share in zip(self._sources, part)
            ]
            if not _sum(masses) < parent:
                continue
            v, factor = rng.random(), self._factor(parent, masses)
            if v * bound < factor:
                return masses
            if factor > ratio * v:
                nearest, ratio = masses, factor / v
        return nearest


def _strength(row, wave):
    """What K of a wave is multiplied with to give its width at the nominal mass, or in the fit where that is 0."""
    width = wave.re**2 + wave.im**2
    if width > 0 and wave.kinematic_factor > 0:
        return width / wave.kinematic_factor
    return row.identical_factor * wave.flavour_amplitude**2


def _sum(numbers):
    """Added up one after another, as in the other languages; `sum` of newer versions compensates for rounding."""
    total = 0.0
    for number in numbers:
        total += number
    return total


def text_of(cascade, place=0, indent=""):
    """A cascade as lines of text, each generation indented under its mother."""
    particle = cascade[place]
    end = "" if particle.end in ("decayed", "left") else f"  ({particle.end})"
    lines = [f"{indent}{particle.name}  {particle.mass:.3f} MeV{end}"]
    for daughter in particle.daughters:
        lines += text_of(cascade, daughter, indent + "  ")
    return lines


def final_state(cascade):
    """The names of the particles that did not decay, in alphabetical order."""
    return " ".join(sorted(particle.name for particle in cascade if particle.end != "decayed"))


def main(arguments=None):
    parser = argparse.ArgumentParser(description="Draw whole decay cascades from a table file written by Couplet.")
    parser.add_argument("file")
    parser.add_argument("--parent", help="start with this hadron; with each parent of the table without it")
    parser.add_argument("--cascades", type=int, default=1000, help="cascades to draw for each (default 1000)")
    parser.add_argument("--show", type=int, default=3, help="how many of them to print (default 3)")
    parser.add_argument("--mass", type=float, help="mass of the parent in MeV; from its line shape without it")
    parser.add_argument("--seed", type=int, default=1, help="seed of the random numbers (default 1)")
    options = parser.parse_args(arguments)
    try:
        tables = read_tables(options.file)
        cascades = Cascades(tables)
        rng = random.Random(options.seed)
        for name in [options.parent] if options.parent else [parent.hadron.name for parent in tables.parents]:
            counts = collections.Counter()
            for number in range(options.cascades):
                cascade = cascades.draw(name, rng, options.mass)
                counts[final_state(cascade)] += 1
                if number < options.show:
                    print("\n".join(text_of(cascade)))
            print(f"{name}: {options.cascades} cascades, {len(counts)} final states; the most frequent:")
            for state, count in counts.most_common(10):
                print(f"  {count:>8}  {state}")
    except (OSError, NotOurs, ValueError) as error:
        print(error, file=sys.stderr)
        return 2
    except Damaged as error:
        print(error, file=sys.stderr)
        return 3
    return 0


if __name__ == "__main__":
    sys.exit(main())
