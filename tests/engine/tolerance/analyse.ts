/** Runs an analysis of a few lines to its end. */
import { createSheetEngine } from '../../../shared/engine'
import type { ToleranceOutput, ToleranceRequest, ToleranceResult } from '../../../shared/engine'
import { inputOf, settings } from '../language/support'

export const REQUEST: ToleranceRequest = { inputs: [], outputs: [], methods: ['worst case', 'root-sum-square', 'random'], seed: 1, samples: 100_000 }

export function analyse(lines: readonly string[], sources: readonly string[], more: Partial<ToleranceRequest> = {}): ToleranceResult {
  const engine = createSheetEngine(settings)
  engine.evaluate(inputOf(lines))
  const run = engine.tolerance({ ...REQUEST, outputs: sources.map((source, i) => ({ id: `o${i}`, source })), ...more })
  for (;;) {
    const step = run.next()
    if (step.done) return step.value
  }
}

export function output(lines: readonly string[], source: string, more: Partial<ToleranceRequest> = {}): ToleranceOutput {
  const { problems, outputs } = analyse(lines, [source], more)
  const [found] = outputs
  if (!found) throw new Error(JSON.stringify(problems))
  return found
}
