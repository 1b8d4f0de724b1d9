/** Random samples of the parts: each draw hangs on the seed, the sample and the cause alone, so order does not matter. */
import { uniformAt } from '../numeric/chance'
import { agedValue, initialAt } from './parts'
import type { Model } from './parts'

/** Streams of a batch: initial value, temperature coefficient, ageing. Stream 0 is the temperature. */
const STREAMS = 3

/**
 * Fills `values` with one sample of all parts. Temperature, coefficients and ageing are uniform
 * between their limits; parts of a batch share each draw.
 */
export function drawSample(model: Model, seed: number, sample: number, values: Float64Array): void {
  const { rise, warm } = model
  const now = warm ? rise.low + (rise.high - rise.low) * uniformAt(seed, sample, 0) : 0
  model.parts.forEach((part, i) => {
    const stream = 1 + part.batch * STREAMS
    const initial = initialAt(part, uniformAt(seed, sample, stream))
    const { coefficient, ageing } = part
    const slope = warm ? within(coefficient, seed, sample, stream + 1) : 0
    values[i] = agedValue(initial, slope, now, within(ageing, seed, sample, stream + 2))
  })
}

function within({ low, high }: { low: number, high: number }, seed: number, sample: number, stream: number): number {
  return low === high ? low : low + (high - low) * uniformAt(seed, sample, stream)
}
