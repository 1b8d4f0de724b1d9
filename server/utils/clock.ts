/** What time it is for the commands. The demonstration lays its records back over some weeks; nothing else sets it. */
import { AsyncLocalStorage } from 'node:async_hooks'

const moment = new AsyncLocalStorage<Date>()

export const now = (): Date => new Date(moment.getStore() ?? Date.now())

/** Runs `work` as if it were `when`. */
export const during = <T>(when: Date, work: () => T): T => moment.run(when, work)
