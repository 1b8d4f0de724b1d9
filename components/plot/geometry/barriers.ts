/** Requirement limits as barriers on the gain panel. */
import type { Asymptote, RequirementBarrier, ResponseCurve } from '#shared/engine/types'
import { engineering, plainNumber } from './numbers'

export interface LabelledBarrier {
  barrier: RequirementBarrier
  /** `Req 2` */
  name: string
}
export interface DrawnBarrier {
  name: string
  text: string
  /** Gain at the edge, dB. */
  edge: number
  /** The forbidden side. */
  side: 'above' | 'below'
  /** Hz */
  from: number
  to: number
}

/**
 * The gain, dB, that attenuation is counted from: that of a level asymptote (low side first), else the highest of the curve.
 * The same rule as the function `attenuation` of a line.
 */
export function passbandGain(asymptotes: readonly Asymptote[], curve: ResponseCurve): number {
  const level = (side: 'low' | 'high') => asymptotes.find(one => one.side === side && one.slope === 0 && Number.isFinite(one.gainAtOneHertz))
  return (level('low') ?? level('high'))?.gainAtOneHertz ?? Math.max(...curve.gain.filter(Number.isFinite))
}

function words({ name, barrier }: LabelledBarrier): string {
  const where = barrier.from === barrier.to
    ? `at ${engineering(barrier.from, 'Hz')}`
    : `${engineering(barrier.from, 'Hz')} to ${engineering(barrier.to, 'Hz')}`
  const quantity = barrier.quantity === 'attenuation' ? 'attenuation' : 'gain'
  return `${name} · ${quantity} ${barrier.sense} ${plainNumber(barrier.limit)} dB ${where}`
}

/** What is forbidden, in gain: an attenuation of at least 30 dB forbids every gain above −30 dB of the passband. */
export function drawnBarriers(barriers: readonly LabelledBarrier[], asymptotes: readonly Asymptote[], curve: ResponseCurve): DrawnBarrier[] {
  const passband = passbandGain(asymptotes, curve)
  return barriers.map(({ barrier, name }) => {
    const attenuation = barrier.quantity === 'attenuation'
    const capsGain = attenuation === (barrier.sense === 'at least')
    return {
      name,
      text: words({ barrier, name }),
      edge: attenuation ? passband - barrier.limit : barrier.limit,
      side: capsGain ? 'above' : 'below',
      from: barrier.from,
      to: barrier.to,
    }
  })
}
