const MINUTE_MS = 60_000;
const HOUR_MS = 60 * MINUTE_MS;
const DAY_MS = 24 * HOUR_MS;

const dateFormat = new Intl.DateTimeFormat("en-GB", { day: "numeric", month: "short", year: "numeric" });
const timeFormat = new Intl.DateTimeFormat("en-GB", { hour: "2-digit", minute: "2-digit", hourCycle: "h23" });

/** "12 Mar 2026", in the reader's own time zone. */
export function formatDate(at: Date): string {
  return dateFormat.format(at);
}

/** "12 Mar 2026, 14:02", in the reader's own time zone. */
export function formatMoment(at: Date): string {
  return `${dateFormat.format(at)}, ${timeFormat.format(at)}`;
}

/** How long ago: "just now", "2 min ago", "5 h ago", "3 days ago", beyond a fortnight the date. */
export function formatAgo(at: Date, now: Date): string {
  const ms = now.getTime() - at.getTime();
  if (ms < MINUTE_MS) return "just now";
  if (ms < HOUR_MS) return `${Math.floor(ms / MINUTE_MS)} min ago`;
  if (ms < DAY_MS) return `${Math.floor(ms / HOUR_MS)} h ago`;
  const days = Math.floor(ms / DAY_MS);
  if (days === 1) return "yesterday";
  return days <= 14 ? `${days} days ago` : formatDate(at);
}
