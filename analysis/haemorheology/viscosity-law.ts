import type { Caution } from '../cautions/cautions.ts';
import type { CautionCodes } from './ranges.ts';
import type { Quantity } from '../units/quantity.ts';

/** A parameter of a law that a plan fixes in advance. */
export interface LawParameter {
  readonly name: 'shearRate' | 'diameter' | 'proteinMinusAlbumin' | 'totalProtein' | 'temperature';
  readonly unit: string;
  readonly default: number;
}

export type LawOptions = { readonly [Name in LawParameter['name']]?: number };

interface LawViscosity {
  readonly viscosity: Quantity<'mPa.s'>;
  readonly cautions: readonly Caution[];
}

/** A viscosity law that knows haematocrit, so that the split may use it. Id, parameters and version belong to a result. */
export interface ViscosityLaw {
  readonly id: string;
  readonly name: string;
  readonly version: number;
  readonly parameters: readonly LawParameter[];
  /** Haematocrit for which the law was published; a value outside carries a caution or is refused. */
  readonly range: { readonly low: number; readonly high: number };
  /** Laws fitted to whole blood take no plasma viscosity; a change of plasma does not move them. */
  readonly usesPlasmaViscosity: boolean;
  readonly source: string;
  readonly viscosity: (
    haematocrit: Quantity<'1'>,
    plasmaViscosity: Quantity<'mPa.s'>,
    options?: LawOptions,
  ) => LawViscosity;
}

/** A row of the table of laws: a formula and the cautions of its range. */
export type LawFormula = Omit<ViscosityLaw, 'viscosity' | 'version'> & {
  readonly compute: (h: Quantity<'1'>, plasma: Quantity<'mPa.s'>, options: LawOptions) => number;
  readonly cautions: (h: number, options: LawOptions) => CautionCodes;
};
