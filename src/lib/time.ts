const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];

const pad = (value: number) => String(value).padStart(2, '0');
const sameDay = (a: Date, b: Date) => a.toDateString() === b.toDateString();

/** Name of the viewer's zone at that moment, such as `CET` or `GMT+2`. */
export function zoneName(at: Date = new Date()): string {
  const part = new Intl.DateTimeFormat('en-GB', { timeZoneName: 'short' })
    .formatToParts(at)
    .find(({ type }) => type === 'timeZoneName');
  return part?.value ?? 'local time';
}

/** Time of day in the viewer's zone: `10:42`. */
export function clock(iso: string): string {
  const at = new Date(iso);
  return `${pad(at.getHours())}:${pad(at.getMinutes())}`;
}

/** Day in the viewer's zone: `1 Dec`, with the year when it isn't this one. */
export function day(iso: string, now: Date = new Date()): string {
  const at = new Date(iso);
  const text = `${at.getDate()} ${MONTHS[at.getMonth()]}`;
  return at.getFullYear() === now.getFullYear() ? text : `${text} ${at.getFullYear()}`;
}

/** Short form for tables: the time today, else the day. */
export function shortTime(iso: string, now: Date = new Date()): string {
  return sameDay(new Date(iso), now) ? clock(iso) : day(iso, now);
}

/** Day and time: `1 Dec 10:19`. */
export function dayAndTime(iso: string, now: Date = new Date()): string {
  return `${day(iso, now)} ${clock(iso)}`;
}

/** Whole form for tooltips, with the zone: `1 Dec 2026, 10:19:07 CET`. */
export function fullTime(iso: string): string {
  const at = new Date(iso);
  const date = `${at.getDate()} ${MONTHS[at.getMonth()]} ${at.getFullYear()}`;
  return `${date}, ${clock(iso)}:${pad(at.getSeconds())} ${zoneName(at)}`;
}

/** A person's first name, for tables. */
export function firstName(name: string): string {
  return name.split(' ', 1)[0];
}
