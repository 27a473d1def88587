/** Bounds on what an author may publish (WS-10); each is named in the message that refuses. */
export const instrumentLimits = {
  /** Length of the schema's text in characters. */
  characters: 200_000,
  /** Objects and lists inside each other. */
  depth: 20,
  /** `$ref` keywords. */
  references: 60,
  /** Schema nodes with each reference followed: a short text can unfold without end. */
  expandedNodes: 20_000,
  fields: 200,
  /** Groups of fields inside each other. */
  groupLevels: 3,
  checks: 200,
  readings: 60,
  patternCharacters: 300,
} as const;
