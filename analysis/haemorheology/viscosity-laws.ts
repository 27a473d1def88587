import { cautions } from '../cautions/cautions.ts';
import { requireHaematocrit } from './require-haematocrit.ts';
import { DomainError } from '../units/errors.ts';
import { quantity } from '../units/quantity.ts';
import { requirePositive } from '../units/require.ts';
import { lawTable } from './law-table.ts';
import type { LawOptions, ViscosityLaw } from './viscosity-law.ts';

/** The laws that a plan may name, version 1 each; a changed formula gets a new version. */
export const viscosityLaws: readonly ViscosityLaw[] = lawTable.map(
  ({ compute, cautions: codes, ...law }) => ({
    ...law,
    version: 1,
    viscosity: (haematocrit, plasmaViscosity, options = {}) => {
      requireHaematocrit(haematocrit);
      requirePositive('plasmaViscosity', plasmaViscosity);
      const chosen = { ...Object.fromEntries(law.parameters.map((p) => [p.name, p.default])), ...options };
      return {
        viscosity: quantity(compute(haematocrit, plasmaViscosity, chosen)),
        cautions: cautions(codes(haematocrit, chosen)),
      };
    },
  }),
);

/** Laws shown side by side in every report, so that a reader sees how far the split depends on the law. */
export const defaultSensitivityLaws: readonly { readonly law: string; readonly options: LawOptions }[] = [
  { law: 'pries-bulk', options: {} },
  { law: 'quemada-cokelet', options: { shearRate: 200 } },
  { law: 'pries-in-vitro', options: { diameter: 100 } },
];

/** Finds a law by id; Carreau's laws are refused because they do not know haematocrit. */
export function viscosityLawNamed(id: string): ViscosityLaw {
  const law = viscosityLaws.find((candidate) => candidate.id === id);
  if (law) return law;
  const remedy = `Use one of ${viscosityLaws.map((candidate) => candidate.id).join(', ')}.`;
  if (/carreau/i.test(id)) {
    throw new DomainError(
      'law',
      'a viscosity law that knows haematocrit; a Carreau law is forbidden in the split',
      id,
      remedy,
    );
  }
  throw new DomainError('law', 'the id of a known viscosity law', id, remedy);
}
