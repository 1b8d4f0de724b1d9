/** Figures of a sample, with sums in a fixed order. */

export interface Summary { mean: number, deviation: number, sorted: Float64Array }

/** Mean and standard deviation (over n − 1) by two passes. The values are finite and at least one. */
export function summaryOf(values: Float64Array): Summary {
  let sum = 0
  for (const value of values) sum += value
  const mean = sum / values.length
  let squares = 0
  for (const value of values) squares += (value - mean) * (value - mean)
  const deviation = values.length > 1 ? Math.sqrt(squares / (values.length - 1)) : 0
  return { mean, deviation, sorted: Float64Array.from(values).sort() }
}

/** Quantile between order statistics: definition 7 of Hyndman and Fan, The American Statistician 50 (1996) 361. */
export function quantile(sorted: Float64Array, p: number): number {
  const place = (sorted.length - 1) * p
  const below = Math.floor(place)
  const low = sorted[below] ?? NaN
  const high = sorted[Math.min(below + 1, sorted.length - 1)] ?? low
  return low + (high - low) * (place - below)
}

/** Counts in bins of equal width from the least to the greatest value. */
export function histogramOf(sorted: Float64Array, bins: number): number[] {
  const counts = Array.from({ length: bins }, () => 0)
  const low = sorted[0] ?? 0
  const width = (sorted[sorted.length - 1] ?? 0) - low
  for (const value of sorted) {
    const bin = width > 0 ? Math.min(bins - 1, Math.floor((value - low) / width * bins)) : 0
    counts[bin] = (counts[bin] ?? 0) + 1
  }
  return counts
}

const NINETY_FIVE = 1.959963984540054

/** 95 % interval of a part: E. B. Wilson, Journal of the American Statistical Association 22 (1927) 209. */
export function partInterval(met: number, of: number): { low: number, high: number } {
  const p = met / of
  const z = NINETY_FIVE * NINETY_FIVE / of
  const centre = (p + z / 2) / (1 + z)
  const half = Math.sqrt(z * (p * (1 - p) + z / 4)) / (1 + z)
  return { low: met === 0 ? 0 : Math.max(0, centre - half), high: met === of ? 1 : Math.min(1, centre + half) }
}
