/**
 * Dates and ages in words. All of it in UTC, so that a page says the same on the server, in the browser and on paper.
 */

const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec']

/** `2026-12-01T09:30:00Z` or `2026-12-01` → `1 Dec 2026`. Anything else → an empty string. */
export function dateWords(iso: string | null | undefined): string {
  const time = iso ? new Date(iso) : null
  if (!time || Number.isNaN(time.getTime())) return ''
  return `${time.getUTCDate()} ${MONTHS[time.getUTCMonth()]} ${time.getUTCFullYear()}`
}

/** `1 Dec 2026, 09:30 UTC`. */
export function momentWords(iso: string | null | undefined): string {
  const date = dateWords(iso)
  return date && iso ? `${date}, ${new Date(iso).toISOString().slice(11, 16)} UTC` : ''
}

/** Working days in words: 0 → `today`, 1 → `1 working day`. */
export function ageWords(workingDays: number): string {
  if (workingDays <= 0) return 'today'
  return workingDays === 1 ? '1 working day' : `${workingDays} working days`
}

/** Whether a due date (date only) has passed: due on the day itself is still in time. */
export function isOverdue(due: string | null, now: string): boolean {
  return due !== null && due.slice(0, 10) < now.slice(0, 10)
}
