/** `npm run bench:engine`: the engine against mathjs and C, interleaved in one run. Ratios are peer over ours. */
import { printRow, saveRows } from './interleave'
import { lineRows } from './lines'
import { sweepRows } from './sweeps'

const rows = [...lineRows(), ...sweepRows()]
rows.forEach(printRow)
saveRows('engine.json', rows)
