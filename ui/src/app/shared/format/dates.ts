/** A day of the calendar (`2027-01-01`), without any time zone. */
export function day(iso: string, locale: string): string {
  return new Intl.DateTimeFormat(locale, { dateStyle: 'medium', timeZone: 'UTC' }).format(
    new Date(iso.slice(0, 10)),
  );
}

/** A moment in the reader's own time zone. */
export function moment(iso: string, locale: string): string {
  return new Intl.DateTimeFormat(locale, { dateStyle: 'medium', timeStyle: 'short' }).format(new Date(iso));
}

const STEPS = [
  { unit: 'day', seconds: 86_400 },
  { unit: 'hour', seconds: 3600 },
  { unit: 'minute', seconds: 60 },
] as const;

/** How long ago, in words. */
export function ago(iso: string, now: number, locale: string): string {
  const seconds = (new Date(iso).getTime() - now) / 1000;
  const step = STEPS.find((one) => Math.abs(seconds) >= one.seconds);
  const words = new Intl.RelativeTimeFormat(locale, { numeric: 'auto' });
  return step === undefined
    ? words.format(0, 'second')
    : words.format(Math.round(seconds / step.seconds), step.unit);
}

/** A length of time in words, such as 2 minutes. */
export function lasting(seconds: number, locale: string): string {
  const [value, unit] =
    seconds < 90 ? [Math.max(1, Math.round(seconds)), 'second'] : [Math.round(seconds / 60), 'minute'];
  return new Intl.NumberFormat(locale, { style: 'unit', unit, unitDisplay: 'long' }).format(value);
}
