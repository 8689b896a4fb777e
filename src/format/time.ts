/** A moment in the viewer's own zone: 14 May 2026, 16:20. */
export function timeText(iso: string, zone?: string): string {
  const parts = new Intl.DateTimeFormat("en-GB", {
    day: "numeric",
    month: "long",
    year: "numeric",
    hour: "2-digit",
    minute: "2-digit",
    timeZone: zone,
  });
  return parts.format(new Date(iso)).replace(" at ", ", ");
}

export function dayText(iso: string, zone?: string): string {
  return new Intl.DateTimeFormat("en-GB", { day: "numeric", month: "long", year: "numeric", timeZone: zone }).format(
    new Date(iso),
  );
}

const STEPS: readonly (readonly [Intl.RelativeTimeFormatUnit, number])[] = [
  ["year", 31_557_600],
  ["month", 2_629_800],
  ["week", 604_800],
  ["day", 86_400],
  ["hour", 3600],
  ["minute", 60],
];

/** How long ago, in the largest unit that fits: `3 days ago`, `just now`. */
export function agoText(iso: string, now: number): string {
  const seconds = (Date.parse(iso) - now) / 1000;
  for (const [unit, size] of STEPS) {
    if (Math.abs(seconds) >= size) {
      return new Intl.RelativeTimeFormat("en", { numeric: "auto" }).format(Math.trunc(seconds / size), unit);
    }
  }
  return "just now";
}

/** A span of seconds for people: under 0.1 s, 0.21 s, 41 s, 3 min 5 s. */
export function spanText(seconds: number): string {
  if (seconds < 0.05) return "under 0.1 s";
  if (seconds < 10) return `${Number(seconds.toPrecision(2))} s`;
  if (seconds < 100) return `${Math.round(seconds)} s`;
  const whole = Math.round(seconds);
  return `${Math.floor(whole / 60)} min ${whole % 60} s`;
}
