/** The engine's own process: it gets one sheet at a time and is killed when one takes too long. */
import { compute } from './compute'
import { computeFigures } from './figures'
import type { CalcAnswer, CalcQuestion } from './messages'

process.on('message', (question: CalcQuestion) => {
  const answer = (message: CalcAnswer) => process.send?.(message)
  try {
    const work = question.call === 'figures' ? computeFigures : compute
    answer({ id: question.id, ok: true, computed: work(question.document, question.settings) })
  }
  catch (error) {
    answer({ id: question.id, ok: false, message: error instanceof Error ? error.message : 'The engine failed.' })
  }
})
process.on('disconnect', () => process.exit(0))
