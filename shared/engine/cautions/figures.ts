/**
 * Figures that cautions go by. They tell when a reader should be made attentive; they are no
 * statement of conformity, and local codes take precedence.
 */

/** Upper limits of extra-low voltage, V. IEC 61140, IEC 60364-4-41 clause 414 (looked up in the IEV entry "safety extra-low voltage" and a glossary quoting IEC 61140). */
export const EXTRA_LOW_VOLTAGE = { alternating: 50, direct: 120 } as const

/**
 * Stored charge after switch-off: parts above 60 V are to fall to 60 V within 5 s unless they hold at
 * most 60 µC. IEC 60204-1:2016 6.2.4 (looked up in two quotations).
 */
export const RESIDUAL = { voltage: 60, seconds: 5, charge: 60e-6 } as const

/** Stored energy taken as dangerous whatever the voltage, J. Common practice in laboratories, no standard (looked up in a discussion among electricians). */
export const DANGEROUS_ENERGY = 10

/** A resonance below this raises nothing that an engineer would not expect, dB. */
export const NOTABLE_PEAK = 1
