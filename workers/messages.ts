/** What passes between a page and its engine. Types only; the data are the engine's own. */
import type { LineResult, ResponseFigures, ResponseRequest, SheetInput, StepFigures, StepRequest } from '#shared/engine/types'
import type { CautionBlock, SheetCaution } from '#shared/engine'

/** Every question and its answer. */
export interface EngineCalls {
  /** Answers with the results that differ from the ones before. */
  evaluate: { question: SheetInput, answer: LineResult[] }
  response: { question: ResponseRequest, answer: ResponseFigures }
  step: { question: StepRequest, answer: StepFigures }
  /** LaTeX of an expression, or null where it cannot be read. */
  typeset: { question: string, answer: string | null }
  /** What is wrong with an expression, in words, or null. */
  expression: { question: string, answer: string | null }
  cautions: { question: CautionBlock[], answer: SheetCaution[] }
}
export type EngineCall = keyof EngineCalls

export type EngineQuestion = { [Call in EngineCall]: { number: number, call: Call, question: EngineCalls[Call]['question'] } }[EngineCall]

export type EngineReply =
  | { ready: true }
  | { number: number, ok: true, answer: EngineCalls[EngineCall]['answer'] }
  | { number: number, ok: false, message: string }
