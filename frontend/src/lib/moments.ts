/** Moments as words: short for tables, whole for tooltips. */
const DAY_MS = 86_400_000;

const startOfDay = (moment: Date): number =>
  new Date(moment.getFullYear(), moment.getMonth(), moment.getDate()).getTime();

const clock = (moment: Date): string =>
  `${String(moment.getHours()).padStart(2, "0")}:${String(moment.getMinutes()).padStart(2, "0")}`;

const MONTHS = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];

/** "just now", "12 min ago", "today 14:02", "yesterday 09:30", "29 Nov", "29 Nov 2025". */
export function whenInWords(iso: string, now = new Date()): string {
  const moment = new Date(iso);
  const ageMs = now.getTime() - moment.getTime();
  if (Math.abs(ageMs) < 60_000) return "just now";
  if (ageMs > 0 && ageMs < 3_600_000) return `${Math.floor(ageMs / 60_000)} min ago`;
  const days = Math.round((startOfDay(now) - startOfDay(moment)) / DAY_MS);
  if (days === 0) return `today ${clock(moment)}`;
  if (days === 1) return `yesterday ${clock(moment)}`;
  const date = `${moment.getDate()} ${MONTHS[moment.getMonth()] ?? ""}`;
  return moment.getFullYear() === now.getFullYear() ? date : `${date} ${moment.getFullYear()}`;
}

/** "29 Nov 2026, 14:02". */
export function wholeMoment(iso: string): string {
  const moment = new Date(iso);
  return `${moment.getDate()} ${MONTHS[moment.getMonth()] ?? ""} ${moment.getFullYear()}, ${clock(moment)}`;
}
