/** Counts what was tried; says only what went wrong. */
export class Tally {
  passed = 0
  failed = 0

  check(ok: boolean, what: string, found: () => string): void {
    if (ok) {
      this.passed++
      return
    }
    this.failed++
    console.log(`✗ ${what}: ${found()}`)
  }

  fail(what: string, why: string): void {
    this.check(false, what, () => why)
  }
}
