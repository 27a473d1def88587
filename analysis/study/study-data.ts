/** One measured number of a visit, as a cut holds it. */
export interface MeasureRow {
  participant: string;
  /** 1 or 2 in a crossover; 1 elsewhere. */
  period: number;
  /** The condition given in that period: a real one, or a coded or flipped one. */
  condition: string;
  timePoint: string;
  quantity: string;
  /** In the unit of the protocol's measured quantities; null when there is none. */
  value: number | null;
  /** Why there is none, in words. */
  reason: string | null;
}

/** What a run works on: the part of a cut that the analysis needs. */
export interface StudyData {
  /** Condition keys with the words to use for them. */
  conditions: readonly { key: string; label: string }[];
  /** Everyone who was allocated, in the order of the cut. */
  participants: readonly { participant: string; sequence: string | null }[];
  measures: readonly MeasureRow[];
  /** Left out before the analysis (withdrawn, excluded by a decision), each with a reason. */
  excluded: readonly { participant: string; reason: string }[];
}
