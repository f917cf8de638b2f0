"""One case of a response with parameters: what a truth says of it beside the functions."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from functools import cached_property
from itertools import chain

from flint import arb

from closedform.algebra.field import FieldMatrix, Polynomial, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.parametric_spectrum import parametric_spectrum, spectrum_under_relation
from closedform.algebra.spectrum import Factor
from closedform.algebra.surds import SurdSum
from closedform.checking.truth import Eigenvalue, Truth
from closedform.checking.truths.eigenvalues import eigenvalue_of
from closedform.checking.truths.formulas import element_written, number_written, written_from
from closedform.checking.truths.numbers import number_of
from closedform.checking.truths.region import Region, region_of
from closedform.checking.truths.roots_in_case import roots_in_case
from closedform.notation.expression import Expression, names_in
from closedform.notation.rational_formula import rational_formula
from closedform.notation.written.tree import Written
from closedform.response.parametric.case import Case
from closedform.response.parametric.known import known_at
from closedform.response.parametric.modes import Mode
from closedform.response.parametric.numbers import case_at
from closedform.response.parametric.response import ParametricResponse

__all__ = ["CaseTruth", "InCase", "cases_in_order"]


@dataclass(frozen=True)
class CaseTruth(Truth):
    """The truth about one case, with the part of the parameters' values that it belongs to."""

    region: Region | None = None


@dataclass(frozen=True)
class InCase:
    """A case of a response; `further` are names with formulas beside its quantities."""

    response: ParametricResponse
    case: Case
    further: tuple[tuple[str, Expression], ...] = ()

    @property
    def field(self) -> ParameterField:
        """The field of the model."""
        return self.response.model.field

    @property
    def names(self) -> tuple[str, ...]:
        """The parameters."""
        return self.field.free

    def described(self, truth: CaseTruth) -> CaseTruth:
        """Return a truth with what is said of the case beside its functions."""
        return replace(
            truth,
            quantities=self.written_quantities,
            enclosures=self.enclosures,
            enclosures_at=self.enclosures_at,
            condition=self.condition,
            sign=self.region.sign_among(self.names),
            samples=self.samples,
            values=self.written_values(),
            equations=self.region.equations,
            region=self.region,
        )

    @property
    def condition(self) -> str:
        """The condition of the case, empty if it holds everywhere."""
        return self.case.condition if self.case.conditions else ""

    @cached_property
    def region(self) -> Region:
        """Where the case holds."""
        return region_of(self.field, self.case)

    @cached_property
    def values(self) -> Mapping[str, SurdSum] | None:
        """The values of the model file, if they belong to this case."""
        given = self.response.model.values
        if given is None or case_at(self.response, given).number != self.case.number:
            return None
        return {name: value for name, value in given.values if name in self.names}

    @cached_property
    def points(self) -> tuple[dict[str, Scalar], ...]:
        """Some points of the case."""
        return self.region.points(self.names)

    @property
    def samples(self) -> tuple[dict[str, Written], ...]:
        """The same as written trees."""
        field = self.field
        return tuple({n: element_written(field, v) for n, v in p.items()} for p in self.points)

    def written_values(self) -> dict[str, Written] | None:
        """Return the values of the model file as written trees."""
        given = self.values
        return None if given is None else {n: number_written(v) for n, v in given.items()}

    @cached_property
    def quantities(self) -> tuple[tuple[str, Expression | None], ...]:
        """What the model has names for, then what the case has; None for a root."""
        model = self.response.model
        of_model = {
            d.name: rational_formula(self.field, d.value)
            for d in (*model.restated, *model.abbreviations)
        }
        of_case = [(q.name, q.formula) for q in self.case.quantities if q.name not in of_model]
        return (*of_model.items(), *of_case, *self.further)

    @property
    def written_quantities(self) -> tuple[tuple[str, Written | None], ...]:
        """The same as written trees."""
        return tuple((n, None if f is None else written_from(f)) for n, f in self.quantities)

    @cached_property
    def unknown(self) -> frozenset[str]:
        """The names of roots, and of what is made of these."""
        found: set[str] = set()
        for name, formula in self.quantities:
            if formula is None or names_in(formula) & found:
                found.add(name)
        return frozenset(found)

    @cached_property
    def at(self) -> Mapping[str, SurdSum] | None:
        """The values of the model file, or the first point with rational values."""
        if self.values is not None or not self.names:
            return self.values or {}
        for point in self.points:
            values = {n: self.field.number(v) for n, v in point.items()}
            known = {n: v for n, v in values.items() if v is not None}
            if len(known) == len(values):
                return known
        return None

    def balls_at(self, values: Mapping[str, SurdSum]) -> Mapping[str, arb]:
        """Return balls for all names at values of the parameters."""
        return known_at(self.field, self.case, values).balls()

    def enclosures(self) -> Mapping[str, arb]:
        """Return balls for the names of roots."""
        return {} if self.at is None else self._of_roots(self.at)

    def enclosures_at(self, values: Mapping[str, Written]) -> Mapping[str, arb]:
        """Return balls for the names of roots at given values."""
        return self._of_roots({name: number_of(values[name]) for name in self.names})

    def _of_roots(self, values: Mapping[str, SurdSum]) -> Mapping[str, arb]:
        roots = [name for name, formula in self.quantities if formula is None]
        balls = self.balls_at(values) if roots else {}
        return {name: balls[name] for name in roots}

    def eigenvalues(self, matrix: FieldMatrix) -> tuple[Eigenvalue, ...]:
        """Return the eigenvalues of A, whose factors are among those of the case."""
        return tuple(chain.from_iterable(self._eigenvalues(matrix)))

    def _eigenvalues(self, matrix: FieldMatrix) -> Iterator[Iterator[Eigenvalue]]:
        at = self.at
        balls = None if at is None else lambda: self.balls_at(at)
        for factor in self._factors(matrix):
            mode = self._mode(factor.p)
            counts = self._counts(matrix, factor, mode)
            yield (
                eigenvalue_of(root, counts, self.unknown, balls)
                for root in roots_in_case(self.field, mode)
            )

    def _factors(self, matrix: FieldMatrix) -> tuple[Factor, ...]:
        branch, field = self.case.branch, self.field
        if matrix.shape == branch.matrix.shape:
            return branch.spectrum.factors
        values = branch.values
        put = [[field.substituted(e, values) for e in row] for row in matrix.to_list()]
        spectrum = parametric_spectrum(field, field.matrix(put))
        if branch.under is not None:
            spectrum = spectrum_under_relation(field, spectrum, branch.under)
        return spectrum.factors

    def _mode(self, p: Polynomial) -> Mode:
        def same(mode: Mode) -> bool:
            pairs = zip(mode.factor.p.to_list(), p.to_list(), strict=True)
            return all(self.region.vanishes(one - other) for one, other in pairs)

        alike = [m for m in self.case.modes if m.factor.degree == p.degree()]
        return next((m for m in alike if m.factor.p == p), None) or next(filter(same, alike))

    def _counts(self, matrix: FieldMatrix, factor: Factor, mode: Mode) -> tuple[int, int, int]:
        if mode.regime.kind == "double":
            linear = self.field.polynomial([self.field.domain.one, -factor.roots.centre])
            algebraic = 2 * factor.multiplicity
            return (algebraic, *self.region.blocks(matrix, linear, algebraic))
        if self.case.branch.relation is not None:
            multiplicity = factor.multiplicity
            return (multiplicity, *self.region.blocks(matrix, factor.p, multiplicity))
        return factor.multiplicity, len(factor.blocks), factor.index


def cases_in_order(truths: list[CaseTruth]) -> tuple[Truth, ...]:
    """Return truths with those first that no equation belongs to."""
    return tuple(sorted(truths, key=lambda truth: bool(truth.equations)))
