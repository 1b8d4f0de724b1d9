import type { InjectionKey } from 'vue'

const KEY: InjectionKey<number> = Symbol('plot-width')
const USUAL = 640

/** Width in pixels for which a plot is drawn where nothing can be measured: on the server, for paper. */
export const usePlotWidth = (): number => inject(KEY, USUAL)

/** Sets that width for all plots below the calling component. */
export const providePlotWidth = (width: number): void => provide(KEY, width)
