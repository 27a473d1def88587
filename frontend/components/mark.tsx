/** The product's mark: a vessel cut across, a wall and an off-centre lumen. */
export function Mark({ size = 26 }: { size?: number }) {
  return (
    <svg width={size} height={size} viewBox="0 0 26 26" aria-hidden className="shrink-0">
      <path
        fill="currentColor"
        fillRule="evenodd"
        d="M13 1.5a11.5 11.5 0 1 0 0 23a11.5 11.5 0 1 0 0-23zM10.6 6.2a5.6 5.6 0 1 1 0 11.2a5.6 5.6 0 1 1 0-11.2z"
      />
    </svg>
  );
}

/**
 * The trace scratched along the band's lower edge: cycles of venous occlusion, the volume climbing in pulses and
 * falling when the cuff opens. Ornament, computed once.
 */
export function BandTrace() {
  return (
    <svg
      viewBox="0 0 1920 18"
      preserveAspectRatio="xMinYMax slice"
      aria-hidden
      className="pointer-events-none absolute inset-x-0 bottom-0 h-4.5 w-full opacity-45"
    >
      <path d={tracePath} fill="none" stroke="currentColor" strokeWidth="1" />
    </svg>
  );
}

const tracePath = trace(1920);

function trace(width: number): string {
  const points: string[] = [];
  const climb = 26;
  for (let x = 0; x < width; x += 22) {
    for (let beat = 0; beat < climb; beat += 1, x += 1.9) {
      const y = 15 - (beat / climb) * 10 + Math.sin(beat * 1.6) * 1.1;
      points.push(`${x.toFixed(1)} ${y.toFixed(1)}`);
    }
    x += 3;
    points.push(`${x.toFixed(1)} 15`, `${(x + 22).toFixed(1)} 15`);
  }
  return `M${points.join('L')}`;
}
