/** `npm run bench:engine`: the engine against mathjs and C, interleaved in one run. Ratios are peer over ours. */
import { printRow, saveRows } from './interleave'
import { lineRows } from './lines'
import { sampleRows } from './samples'
import { sweepRows } from './sweeps'

const rows = [...lineRows(), ...sweepRows(), ...sampleRows()]
rows.forEach(printRow)
saveRows('engine.json', rows)
