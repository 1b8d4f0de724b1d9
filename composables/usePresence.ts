import type { Awareness } from 'y-protocols/awareness'
import { shallowReadonly, shallowRef, type Ref } from 'vue'
import { presenceSchema, type PresentPerson } from '~~/shared/collab/presence'

/** Everybody else in the sheet, once each, whatever the number of their open pages. */
export function presentPeople(states: ReadonlyMap<number, unknown>, ownClient: number, ownUser: string): PresentPerson[] {
  const people = new Map<string, PresentPerson>()
  for (const [client, state] of states) {
    if (client === ownClient) continue
    const presence = presenceSchema.safeParse(state)
    if (!presence.success || presence.data.user.id === ownUser) continue
    const { id, name, initials, color } = presence.data.user
    const line = presence.data.line ?? people.get(id)?.line ?? null
    people.set(id, { id, name, initials, colour: color, line })
  }
  return [...people.values()].sort((a, b) => a.name.localeCompare(b.name))
}

export interface PresenceView {
  people: Readonly<Ref<readonly PresentPerson[]>>
  /** Tells the others at which line or block this person is. */
  standAt: (line: string | null) => void
  stop: () => void
}

/** Who else is in the sheet and where. What others see of a person is made by the server from the session. */
export function usePresence(awareness: Awareness, ownUser: string): PresenceView {
  const people = shallowRef<readonly PresentPerson[]>([])

  const read = () => {
    people.value = presentPeople(awareness.getStates(), awareness.clientID, ownUser)
  }
  awareness.on('change', read)
  read()

  return {
    people: shallowReadonly(people),
    standAt: (line) => {
      const here: unknown = awareness.getLocalState()?.line
      if (here !== line) awareness.setLocalStateField('line', line)
    },
    stop: () => awareness.off('change', read),
  }
}
