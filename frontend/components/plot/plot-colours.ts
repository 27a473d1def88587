const names = [
  'soot',
  'ink',
  'ink-soft',
  'paper',
  'rule',
  'arterial',
  'venous',
  'moss',
  'straw',
  'clay',
  'rule-soft',
] as const;

/** The tokens that plots are drawn in. */
export type PlotColours = Record<(typeof names)[number], string>;

/** The scheme's colours as an element sees them now. */
export function coloursOf(element: Element): PlotColours {
  const style = getComputedStyle(element);
  return Object.fromEntries(
    names.map((name) => [name, style.getPropertyValue(`--${name}`).trim()]),
  ) as PlotColours;
}

/**
 * The look of the n-th series. Dash and symbol tell it apart too, so that the plot reads in greys and for people who
 * do not see the colours apart.
 */
export function seriesLook(at: number, colours: PlotColours) {
  const looks = [
    { color: colours.venous, dash: 'solid', symbol: 'circle' },
    { color: colours.clay, dash: 'dash', symbol: 'square' },
    { color: colours.arterial, dash: 'dot', symbol: 'diamond' },
    { color: colours.moss, dash: 'dashdot', symbol: 'triangle-up' },
    { color: colours.straw, dash: 'longdash', symbol: 'x' },
  ] as const;
  const { color, dash, symbol } = looks[at % looks.length]!;
  return { line: { color, dash, width: 1.6 }, marker: { color, symbol, size: 7 } };
}
