/** The straight lines of a response, cut where they meet and where the paper ends. */
import type { Asymptote } from '#shared/engine/types'
import type { Range } from './axes'

export interface Stretch { side: 'low' | 'high', slope: number, from: { frequency: number, gain: number }, to: { frequency: number, gain: number } }

const gainOn = (line: Asymptote, frequency: number) => line.gainAtOneHertz + line.slope * Math.log10(frequency)
const frequencyOn = (line: Asymptote, gain: number) => 10 ** ((gain - line.gainAtOneHertz) / line.slope)

/** Frequency, Hz, where the two lines meet; null for parallel ones. */
export function meeting(low: Asymptote, high: Asymptote): number | null {
  if (low.slope === high.slope) return null
  return 10 ** ((low.gainAtOneHertz - high.gainAtOneHertz) / (high.slope - low.slope))
}

/** The part of `line` between the two frequencies that lies inside the gain range. */
function cut(line: Asymptote, from: number, to: number, gain: Range): Stretch | null {
  let [start, end] = [from, to]
  if (line.slope !== 0) {
    const crossings = [frequencyOn(line, gain.from), frequencyOn(line, gain.to)].sort((a, b) => a - b)
    start = Math.max(start, crossings[0]!)
    end = Math.min(end, crossings[1]!)
  }
  else if (line.gainAtOneHertz < gain.from || line.gainAtOneHertz > gain.to) return null
  if (!(start < end)) return null
  return {
    side: line.side,
    slope: line.slope,
    from: { frequency: start, gain: gainOn(line, start) },
    to: { frequency: end, gain: gainOn(line, end) },
  }
}

/** Each asymptote as far as the corner where they meet, or over the whole range where they do not meet in it. */
export function asymptoteStretches(asymptotes: readonly Asymptote[], frequency: Range, gain: Range): Stretch[] {
  const low = asymptotes.find(one => one.side === 'low')
  const high = asymptotes.find(one => one.side === 'high')
  const corner = low && high ? meeting(low, high) : null
  const inside = corner !== null && corner > frequency.from && corner < frequency.to ? corner : null
  return asymptotes
    .filter(line => Number.isFinite(line.gainAtOneHertz))
    .map(line => line.side === 'low' ? cut(line, frequency.from, inside ?? frequency.to, gain) : cut(line, inside ?? frequency.from, frequency.to, gain))
    .filter(stretch => stretch !== null)
}
