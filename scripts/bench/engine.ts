/** `npm run bench:engine`: the engine against mathjs and C, interleaved in one run. Ratios are peer over ours. */
import { printRow, saveRows } from './interleave'
import { lineRows } from './lines'

const rows = [...lineRows()]
rows.forEach(printRow)
saveRows('engine.json', rows)
