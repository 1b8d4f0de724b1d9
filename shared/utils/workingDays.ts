const DAY = 24 * 60 * 60 * 1000
const dayOf = (time: Date): number => Math.floor(time.getTime() / DAY)
/** 1 January 1970 was a Thursday. */
const isWorkingDay = (day: number): boolean => (day + 3) % 7 < 5

/** Mondays to Fridays that have begun since the day of `since`, in UTC: 0 on the same day. */
export function workingDaysSince(since: Date, now: Date): number {
  const first = dayOf(since) + 1
  const days = dayOf(now) - dayOf(since)
  if (days <= 0) return 0
  const weeks = Math.floor(days / 7)
  const rest = Array.from({ length: days % 7 }, (_, index) => first + weeks * 7 + index).filter(isWorkingDay).length
  return weeks * 5 + rest
}
