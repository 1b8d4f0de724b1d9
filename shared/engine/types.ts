/**
 * The engine's public data: what it is given and what it returns.
 * Everything here is plain JSON, so that it crosses a worker, a socket and a database unchanged.
 */

/** Half-open range of UTF-16 offsets in the text of one line, as it was typed. */
export interface SourceRange { from: number, to: number }

export interface Problem {
  /** Stable identifier for tests and help, such as `dimension-mismatch`. */
  code: string
  severity: 'error' | 'warning'
  /** What is wrong, in words for the engineer. */
  message: string
  /** What to do about it. */
  hint?: string
  at?: SourceRange
}

/** One line as the engineer typed it. `id` is unique in a sheet. */
export interface LineInput { id: string, source: string }

export interface EngineSettings {
  /** Significant digits shown; display only, never part of a recorded value. Default 4. */
  significantDigits: number
}

export interface SheetInput { lines: LineInput[], settings: EngineSettings }

/** A number as it is shown: `text` and `unit` are plain text, `latex` is both typeset. */
export interface Shown { text: string, unit: string, latex: string }

export interface Bounds {
  /** SI base units. */
  low: number
  high: number
  shownLow: Shown
  shownHigh: Shown
  /** `proved` by interval derivatives (monotone in every input), `searched` otherwise. */
  method: 'proved' | 'searched'
}

/** Exponents of m, kg, s, A, K, mol, cd. */
export type DimensionVector = readonly [number, number, number, number, number, number, number]

/** Whether a value of a power of time counts cycles or radians. */
export type FrequencyMark = 'Hz' | 'rad/s'

export type ResultValue =
  | { type: 'number', si: number, dimension: DimensionVector, shown: Shown, also?: Shown, bounds?: Bounds, mark?: FrequencyMark }
  | { type: 'complex', re: number, im: number, dimension: DimensionVector, shown: Shown, mark?: FrequencyMark }
  | { type: 'list', items: ResultValue[] }
  | { type: 'text', text: string }
  | { type: 'level', db: number, shown: Shown, bounds?: Bounds, reference?: 'dBm' | 'dBV' | 'dBuV' }
  | { type: 'unbounded', shown: Shown }
  | { type: 'transfer', rational: boolean, order?: number, dimension: DimensionVector, summary: string[], standardForm?: string }
  | { type: 'function', parameters: string[] }

export type Verdict = 'met' | 'not met at worst case' | 'not met'

export interface RequirementResult {
  verdict: Verdict
  /** Worst-case margin, positive when met. */
  margin: Shown
  marginSi: number
  /** What the margin is: its dimension, or a level in dB. */
  marginIn?: { type: 'number' | 'level', dimension?: DimensionVector, mark?: FrequencyMark }
  nominalMargin: Shown
  nominalMarginSi: number
  /** The worst part of a chain or list, or the worst frequency of a band, where that says more. */
  at?: string
  /** What is compared, for the head of the sheet: the line's note if it has one, else its text. */
  subject: string
  /** A barrier that can be drawn on a response plot. */
  barrier?: RequirementBarrier
  /** Names without a tolerance that the verdict rests on. */
  untoleranced: string[]
}

/** A limit on the gain or attenuation of a transfer function over a range of frequency. */
export interface RequirementBarrier {
  transfer: string
  quantity: 'gain' | 'attenuation' | 'magnitude'
  sense: 'at least' | 'at most'
  /** dB. */
  limit: number
  /** Hz; equal for a single frequency. */
  from: number
  to: number
}

export interface LineResult {
  id: string
  status: 'ok' | 'warning' | 'error'
  kind: 'empty' | 'note' | 'value' | 'function' | 'transfer' | 'requirement' | 'error'
  problems: Problem[]
  /** Name that the line defines, if any. */
  defines?: string
  /** Names that it uses directly, in order of first use. */
  uses: string[]
  value?: ResultValue
  requirement?: RequirementResult
  /** LaTeX for KaTeX. `substituted` is left out where it says nothing new. */
  typeset: { formula?: string, substituted?: string, result?: string }
  /** Text after `#`, if any. */
  note?: string
  /** What the result is counted from, where that has to be said: the reference of an attenuation. */
  remark?: string
}

export interface SheetResult { lines: LineResult[] }

/** One curve for a plot; arrays of equal length. */
export interface ResponseCurve {
  /** Hz, logarithmically spaced. */
  frequency: number[]
  /** dB (level of the modulus in SI units of H where H has a dimension). */
  gain: number[]
  /** Degrees, unwrapped. */
  phase: number[]
  /** Worst-case envelope of the gain over tolerances, if any value has one. */
  gainLow?: number[]
  gainHigh?: number[]
}

export interface ResponseMark {
  kind: 'corner' | 'peak' | 'cut-off'
  frequency: number
  gain: number
  shown: Shown
  shownGain: Shown
}

export interface Asymptote { side: 'low' | 'high', slope: number, /** gain of the straight line at 1 Hz, dB */ gainAtOneHertz: number }

export interface ResponseFigures {
  curve: ResponseCurve
  marks: ResponseMark[]
  asymptotes: Asymptote[]
  problems: Problem[]
  /** Lines of the Output column: label, value, unit. */
  summary: { label: string, shown: Shown }[]
}

export interface StepFigures {
  /** s */
  time: number[]
  value: number[]
  finalValue?: number
  peak?: { time: number, value: number, overshoot: number, shown: Shown, shownTime: Shown }
  settling?: { time: number, band: number, shown: Shown }
  problems: Problem[]
}

export interface ResponseRequest {
  transfer: string
  /** Typed as in a line: `1 kHz`. Empty: chosen from the function. */
  from: string
  to: string
  points: number
}

export interface StepRequest { transfer: string, /** Typed as in a line; empty: chosen */ duration: string, points: number }
