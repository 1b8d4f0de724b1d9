/** Linear circuits: what the rest of the engine, the commands and the editor take from here. */
export type * from './types'
export { frequencyResponse, responseAt } from './response'
export type { Response } from './response'
export { polesOf, zerosOf } from './poles'
