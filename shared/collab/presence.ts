/** Where people are in a sheet: what a client may say about itself, and what the server makes of it for the others. */
import { z } from 'zod'
import type { PersonRef } from '../types/api'

const id = z.object({ client: z.int().nonnegative(), clock: z.int().nonnegative() })
/** A Y.RelativePosition as JSON. */
const relativePosition = z.object({
  type: id.nullish(),
  tname: z.string().max(64).nullish(),
  item: id.nullish(),
  assoc: z.int().optional(),
})

/** What a client says. Its name and colour are not its to say: they are dropped. */
export const placeSchema = z.object({
  cursor: z.object({ anchor: relativePosition, head: relativePosition }).nullish(),
  line: z.string().max(64).nullish(),
})
export type Place = z.infer<typeof placeSchema>

/** What the others get; `user` has the shape that caret plugins read. */
export const presenceSchema = placeSchema.extend({
  user: z.object({ id: z.string(), name: z.string(), initials: z.string(), color: z.string() }),
})
export type Presence = z.infer<typeof presenceSchema>

export interface PresentPerson extends PersonRef {
  colour: string
  /** The line or block this person is at. */
  line: string | null
}

/** Mid tones that stand on light and on dark paper; initials always go with them. */
const COLOURS = ['#2f7d8a', '#b4572f', '#6a5fb3', '#4e8a3c', '#b0487f', '#3f73b8', '#9a7420', '#7c5a48'] as const

/** The same person has the same colour on every screen. */
export function personColour(userId: string): string {
  let sum = 0
  for (const character of userId) sum = (sum * 31 + character.charCodeAt(0)) % 65_521
  return COLOURS[sum % COLOURS.length] ?? COLOURS[0]
}

/** What stands for a person in the sheet. */
export function presenceOf(person: PersonRef, place: Place): Presence {
  return {
    user: { id: person.id, name: person.name, initials: person.initials, color: personColour(person.id) },
    cursor: place.cursor ?? null,
    line: place.line ?? null,
  }
}
