/** Every function that a line may use. `between` is part of a definition, see `check/tolerance`. */
import { ANGLES } from './angles'
import { BEHAVIOUR } from './behaviour'
import type { Builtin } from './call'
import { ELEMENTARY } from './elementary'
import { LEVELS } from './levels'
import { RESPONSE } from './response'
import { SELECTION } from './selection'
import { SEVERAL } from './several'

const BUILTINS: ReadonlyMap<string, Builtin> = new Map(Object.entries({
  ...ELEMENTARY, ...ANGLES, ...SEVERAL, ...LEVELS, ...SELECTION, ...RESPONSE, ...BEHAVIOUR,
}))

export function findBuiltin(name: string): Builtin | undefined {
  return BUILTINS.get(name)
}

/** How a function is called, for messages and completion. */
export function usageOf(name: string): string | undefined {
  return name === 'between' ? 'between(nominal, low, high)' : BUILTINS.get(name)?.usage
}
