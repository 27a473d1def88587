/** What becomes of the data taken before a withdrawal: in or out of cuts made from then on (CP-03). */
export const earlierDataChoices = ['kept', 'left-out'] as const;
export type EarlierData = (typeof earlierDataChoices)[number];
