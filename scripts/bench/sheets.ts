/** Sheets of many lines with units, which mathjs reads as well. */
import type { SheetInput } from '../../shared/engine'

export const SETTINGS = { significantDigits: 4 }

export function asInput(sources: readonly string[]): SheetInput {
  return { lines: sources.map((source, i) => ({ id: `line-${i}`, source })), settings: SETTINGS }
}

/** Sections of five lines; each R has three lines that rest on it. */
export function sections(length: number): string[] {
  const lines: string[] = []
  for (let i = 1; lines.length < length; i += 1) {
    lines.push(
      `R_${i} = ${(1 + i * 0.013).toFixed(3)} kohm`,
      `C_${i} = ${(2 + i * 0.017).toFixed(3)} nF`,
      `T_${i} = R_${i}*C_${i} to us`,
      `f_${i} = 1/(2*pi*T_${i}) to kHz`,
      `d_${i} = 2*f_${i} to kHz`,
    )
  }
  return lines.slice(0, length)
}

/** Every line rests on the first. */
export function chain(length: number): string[] {
  const lines = ['V_0 = 12.0000 V']
  for (let i = 1; lines.length < length; i += 1) {
    lines.push(
      `V_${i} = 0.98*V_${i - 1}`,
      `I_${i} = V_${i}/(4.7 kohm) to mA`,
      `P_${i} = V_${i}*I_${i} to mW`,
      `E_${i} = P_${i}*(2 ms) to uJ`,
      `Q_${i} = I_${i}*(2 ms) to nC`,
    )
  }
  return lines.slice(0, length)
}
