import type { SheetDocument } from '../../shared/document/types'
import type { EngineSettings } from '../../shared/engine/types'
import type { Computed } from './compute'
import type { SheetFigures } from './figures'

/** Between the server and the engine's process. */
export interface CalcCalls { sheet: Computed, figures: SheetFigures }
export type CalcCall = keyof CalcCalls
export interface CalcQuestion { id: number, call: CalcCall, document: SheetDocument, settings: EngineSettings }
export type CalcAnswer = { id: number, ok: true, computed: CalcCalls[CalcCall] } | { id: number, ok: false, message: string }
