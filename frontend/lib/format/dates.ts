const deviceZone = Intl.DateTimeFormat().resolvedOptions().timeZone;
const formatters = new Map<string, Intl.DateTimeFormat>();

/** `2026-03-14` of an instant, in a zone (the site's; without one, this device's). */
export const formatDate = (instant: string, zone = deviceZone) => parts(instant, zone).date;

/** `09:05` of an instant in a zone; `09:05:17` with seconds. The zone is named once near it, or use `formatMoment`. */
export function formatTime(instant: string, zone = deviceZone, { seconds = false } = {}): string {
  const { time } = parts(instant, zone);
  return seconds ? time : time.slice(0, 5);
}

/** `2026-03-14 09:05 (UTC−5)`: date, time and zone, so that it can be read anywhere. */
export function formatMoment(instant: string, zone = deviceZone, { seconds = false } = {}): string {
  return `${formatDate(instant, zone)} ${formatTime(instant, zone, { seconds })} (${zoneOffset(instant, zone)})`;
}

/** `UTC−5`, the zone's offset at that instant. */
export function zoneOffset(instant: string, zone = deviceZone): string {
  const name = formatter(zone, true)
    .formatToParts(new Date(instant))
    .find(({ type }) => type === 'timeZoneName');
  return (name?.value ?? 'GMT')
    .replace('GMT', 'UTC')
    .replace(/[+-]0$/, '')
    .replace('-', '−');
}

/** `6 days`, `3 h`, `12 min`: how long ago. Only beside the absolute time. */
export function formatAge(since: string, now: number = Date.now()): string {
  const minutes = Math.max(0, Math.floor((now - Date.parse(since)) / 60_000));
  if (minutes < 60) return `${minutes} min`;
  if (minutes < 24 * 60) return `${Math.floor(minutes / 60)} h`;
  const days = Math.floor(minutes / (24 * 60));
  return days === 1 ? '1 day' : `${days} days`;
}

/** Running time: 134 s → `02:14`, an hour and more → `1:02:14`. */
export function formatClock(seconds: number): string {
  const whole = Math.max(0, Math.floor(seconds));
  const two = (part: number) => String(part).padStart(2, '0');
  const hours = Math.floor(whole / 3600);
  const rest = `${two(Math.floor((whole % 3600) / 60))}:${two(whole % 60)}`;
  return hours > 0 ? `${hours}:${rest}` : rest;
}

function parts(instant: string, zone: string): { date: string; time: string } {
  // A date without a time has no zone: shown as it is, or a day would be lost west of Greenwich.
  if (/^\d{4}-\d{2}-\d{2}$/.test(instant)) return { date: instant, time: '' };
  const [date = '', time = ''] = formatter(zone, false).format(new Date(instant)).split(' ');
  return { date, time };
}

function formatter(zone: string, offset: boolean): Intl.DateTimeFormat {
  const key = `${zone} ${offset}`;
  const known = formatters.get(key);
  if (known) return known;
  const made = new Intl.DateTimeFormat(offset ? 'en-GB' : 'sv-SE', {
    timeZone: zone,
    ...(offset
      ? { timeZoneName: 'shortOffset' }
      : {
          year: 'numeric',
          month: '2-digit',
          day: '2-digit',
          hour: '2-digit',
          minute: '2-digit',
          second: '2-digit',
        }),
  });
  formatters.set(key, made);
  return made;
}
