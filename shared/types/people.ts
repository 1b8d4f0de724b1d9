/** What the people pages read. */
import type { PersonRef, Role } from './api'

export interface PersonView extends PersonRef {
  email: string
  /** The first one decides which work list opens. */
  roles: Role[]
  organisation: { id: string, name: string } | null
  /** `invited`: the invitation has not been accepted yet. */
  state: 'active' | 'invited' | 'disabled'
  createdAt: string
}

export interface OrganisationView { id: string, name: string, people: number, projects: number, createdAt: string }

/** A device on which this person is signed in. */
export interface DeviceView { id: string, current: boolean, device: string, ip: string, signedInAt: string, lastSeenAt: string }
