/**
 * How compiled lines are run: at the nominal values, or at a point of the tolerance box.
 * A line's value is computed once a point, however many lines below use it.
 */
import { fault } from '../fault'
import { LIMITS } from '../limits'

/** One value with a tolerance: the same variable wherever its name appears (L6). */
export interface Variable {
  readonly name: string
  readonly nominal: number
  readonly low: number
  readonly high: number
  /** What the current point takes it to be. */
  now: number
  /** Its number within the box that is being worked on, or −1. */
  index: number
}

export class Evaluation {
  /** `remembers` is false where the values behind names change between two runs of the same closures. */
  constructor(readonly remembers = true) {}

  /** 0 at the nominal values; every other point of a box has a number of its own. */
  point = 0
  /** Number of the box over which intervals are computed; another number for every other set of variables. */
  box = 0
  private lastPoint = 0
  private steps = 0

  /** Starts the step count of a line. */
  startLine(): void {
    this.steps = 0
  }

  /** Counts work, so that a hostile line ends at the same place everywhere. */
  spend(steps: number): void {
    this.steps += steps
    if (this.steps > LIMITS.steps) throw fault('too-much-work', 'This line takes too much work to compute.', 'Split it up, or use fewer nested functions, list items or tolerances.')
  }

  /** Sets the variables to a point and runs there; afterwards all is as it was. */
  atPoint<T>(variables: readonly Variable[], values: ArrayLike<number>, run: () => T): T {
    this.lastPoint += 1
    return this.moved(this.lastPoint, variables, i => values[i], run)
  }

  /** Runs at the nominal values, also from within a point. */
  atNominal<T>(variables: readonly Variable[], run: () => T): T {
    return this.moved(0, variables, i => variables[i]?.nominal, run)
  }

  private moved<T>(to: number, variables: readonly Variable[], value: (i: number) => number | undefined, run: () => T): T {
    const before = this.point
    const kept = variables.map(variable => variable.now)
    variables.forEach((variable, i) => {
      variable.now = value(i) ?? variable.nominal
    })
    this.point = to
    try {
      return run()
    }
    finally {
      this.point = before
      variables.forEach((variable, i) => {
        variable.now = kept[i] ?? variable.nominal
      })
    }
  }

  /** Runs interval arithmetic over the box of the variables. */
  overBox<T>(variables: readonly Variable[], run: () => T): T {
    this.box += 1
    variables.forEach((variable, i) => {
      variable.index = i
    })
    try {
      return run()
    }
    finally {
      for (const variable of variables) variable.index = -1
    }
  }
}
