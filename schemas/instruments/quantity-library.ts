/** A quantity of the analysis library as an instrument sees it. */
export interface LibraryQuantity {
  inputs: { name: string; unit: string; array?: boolean }[];
  unit: string;
  version: string;
  /** Throws an error whose message is for a person when no number may come out. */
  compute(inputs: Record<string, { value: number | number[]; unit: string }>): {
    value: number;
    unit: string;
    cautions: QuantityCaution[];
  };
}

export interface QuantityCaution {
  code: string;
  message: string;
}

/** The quantities an instrument may refer to: given as an argument, because schemas do not import the analysis. */
export interface QuantityLibrary {
  get(name: string): LibraryQuantity | undefined;
}
