/**
 * Moments and wall-clock times in words. Moments are shown in the zone they are given (an
 * organization's); days are calendar days 'YYYY-MM-DD'; wall times are 'HH:MM'.
 */

const cache = new Map<string, Intl.DateTimeFormat>();

function format(zone: string, options: Intl.DateTimeFormatOptions): Intl.DateTimeFormat {
  const key = `${zone}|${JSON.stringify(options)}`;
  let made = cache.get(key);
  if (!made) {
    made = new Intl.DateTimeFormat('en-GB', { timeZone: zone, ...options });
    cache.set(key, made);
  }
  return made;
}

const WALL = /^([01]\d|2[0-3]):([0-5]\d)$/;

/** True for 'HH:MM' from 00:00 to 23:59. */
export function isWallTime(text: string): boolean {
  return WALL.test(text);
}

/** Minutes since midnight of 'HH:MM'; NaN when it is none. */
export function wallMinutes(text: string): number {
  const m = WALL.exec(text);
  return m ? Number(m[1]) * 60 + Number(m[2]) : Number.NaN;
}

/** 'HH:MM' as people say it: '8:00 am', '12:15 pm'; with `short`, '8 am' on the hour. */
export function formatWall(text: string, short = false): string {
  const minutes = wallMinutes(text);
  if (Number.isNaN(minutes)) return text;
  const h = Math.floor(minutes / 60);
  const m = minutes % 60;
  const hour = h % 12 === 0 ? 12 : h % 12;
  return `${hour}${short && m === 0 ? '' : `:${String(m).padStart(2, '0')}`} ${h < 12 ? 'am' : 'pm'}`;
}

/** The wall time 'HH:MM' of a moment in a zone. */
export function wallTimeOf(moment: Date, zone: string): string {
  return format(zone, { hour: '2-digit', minute: '2-digit', hourCycle: 'h23' }).format(moment);
}

/** The calendar day 'YYYY-MM-DD' of a moment in a zone. */
export function dayOf(moment: Date, zone: string): string {
  const parts = Object.fromEntries(format(zone, { year: 'numeric', month: '2-digit', day: '2-digit' }).formatToParts(moment).map((p) => [p.type, p.value]));
  return `${parts['year']}-${parts['month']}-${parts['day']}`;
}

/** A moment's time of day: '3:42 pm'. */
export function formatTime(moment: Date, zone: string): string {
  return formatWall(wallTimeOf(moment, zone));
}

function dayParts(day: string, options: Intl.DateTimeFormatOptions): string {
  const date = new Date(`${day}T12:00:00Z`);
  return Number.isNaN(date.getTime()) ? day : format('UTC', options).format(date).replace(',', '');
}

/** A calendar day: 'Saturday 13 March 2027'; `year: false` leaves the year out. */
export function formatDay(day: string, options: { year?: boolean } = {}): string {
  return dayParts(day, { weekday: 'long', day: 'numeric', month: 'long', ...(options.year === false ? {} : { year: 'numeric' }) });
}

/** A calendar day, short: 'Sat 13 Mar'. */
export function formatShortDay(day: string): string {
  return dayParts(day, { weekday: 'short', day: 'numeric', month: 'short' });
}

/** A moment with its day: 'Sat 13 Mar, 3:42 pm'. */
export function formatMoment(moment: Date, zone: string): string {
  return `${formatShortDay(dayOf(moment, zone))}, ${formatTime(moment, zone)}`;
}

/** Minutes east of Greenwich of a zone at a moment. */
function offsetMinutes(moment: Date, zone: string): number {
  const p = Object.fromEntries(
    format(zone, { year: 'numeric', month: '2-digit', day: '2-digit', hour: '2-digit', minute: '2-digit', second: '2-digit', hourCycle: 'h23' })
      .formatToParts(moment)
      .map((x) => [x.type, Number(x.value)]),
  );
  const asUtc = Date.UTC(p['year']!, p['month']! - 1, p['day']!, p['hour']!, p['minute']!, p['second']!);
  return Math.round((asUtc - Math.floor(moment.getTime() / 1000) * 1000) / 60_000);
}

/**
 * The moment of a wall time on a day in a zone. A time that the clocks skip is taken with the offset
 * before the change; one that comes twice is its first.
 *
 * @param day 'YYYY-MM-DD'
 * @param wall 'HH:MM'
 */
export function momentAt(day: string, wall: string, zone: string): Date {
  const naive = Date.parse(`${day}T${wall}:00Z`);
  const before = offsetMinutes(new Date(naive - 86_400_000), zone);
  const candidates = [before, offsetMinutes(new Date(naive + 86_400_000), zone)].map((o) => new Date(naive - o * 60_000));
  return candidates.find((c) => dayOf(c, zone) === day && wallTimeOf(c, zone) === wall) ?? candidates[0]!;
}

/** '1 team', '2 teams'. */
export function counted(n: number, one: string, many = `${one}s`): string {
  return `${n.toLocaleString('en-US')} ${n === 1 ? one : many}`;
}
