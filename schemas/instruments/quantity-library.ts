/** A quantity of the analysis library as an instrument sees it. */
export interface LibraryQuantity {
  inputs: QuantityInputDefinition[];
  unit: string;
  version: string;
  /** Throws an error whose message is for a person when no number may come out. */
  compute(inputs: Record<string, { value: number | number[]; unit: string }>): {
    value: number;
    unit: string;
    cautions: QuantityCaution[];
  };
}

export interface QuantityInputDefinition {
  name: string;
  unit: string;
  /** Takes the readings themselves, not their summary. */
  array?: boolean;
  optional?: boolean;
  /** Whether a value in another unit can be brought to this one by the quantity; absent: only the same unit. */
  accepts?: (unit: string) => boolean;
}

export interface QuantityCaution {
  code: string;
  message: string;
}

/** The quantities an instrument may refer to: given as an argument, because schemas do not import the analysis. */
export interface QuantityLibrary {
  get(name: string): LibraryQuantity | undefined;
}
