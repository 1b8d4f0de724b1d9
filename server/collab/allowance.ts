import { COLLABORATION_LIMITS } from '../../shared/limits'

/** How much a connection may still send now: refills steadily, holds so much at most. */
export class Allowance {
  private frames: number = COLLABORATION_LIMITS.framesAtOnce
  private bytes: number = COLLABORATION_LIMITS.bytesAtOnce
  private at: number

  constructor(private readonly clock: () => number = Date.now) {
    this.at = clock()
  }

  /** Takes one frame of so many bytes; false when it is too much. */
  take(bytes: number): boolean {
    const now = this.clock()
    const seconds = Math.max(0, now - this.at) / 1000
    this.at = now
    this.frames = Math.min(COLLABORATION_LIMITS.framesAtOnce, this.frames + seconds * COLLABORATION_LIMITS.framesPerSecond) - 1
    this.bytes = Math.min(COLLABORATION_LIMITS.bytesAtOnce, this.bytes + seconds * COLLABORATION_LIMITS.bytesPerSecond) - bytes
    return this.frames >= 0 && this.bytes >= 0
  }
}
