/** People, clients, signing in. */
import { openSessionFor, unique } from '../../helpers/people'
import { ofFirm, ofPerson, open } from '../rule'
import type { Rule } from '../rule'

const TOKEN = 'A'.repeat(43)
const PASSWORD = 'three poles and a zero'
const someone = () => ({ email: `${unique('n')}@polewright.example`, name: 'Sofia Brandt', initials: 'SB', roles: ['engineer'] })

export const accounts: Rule[] = [
  open('server/api/[...].ts', '/api/nothing/here', 404),
  open('server/api/health.get.ts', '/api/health', 200),

  open('server/api/auth/session.get.ts', '/api/auth/session', [200, 204]),
  open('server/api/auth/sign-in.post.ts', '/api/auth/sign-in', 401, { email: 'nobody@polewright.example', password: 'not a password' }),
  open('server/api/auth/sign-out.post.ts', '/api/auth/sign-out', 204),
  open('server/api/auth/invitation.get.ts', `/api/auth/invitation?token=${TOKEN}`, 404),
  open('server/api/auth/reset.get.ts', `/api/auth/reset?token=${TOKEN}`, 404),
  open('server/api/auth/accept-invitation.post.ts', '/api/auth/accept-invitation', 404, { token: TOKEN, password: PASSWORD }),
  open('server/api/auth/reset.post.ts', '/api/auth/reset', 404, { token: TOKEN, password: PASSWORD }),
  open('server/api/auth/reset-request.post.ts', '/api/auth/reset-request', 202, { email: 'nobody@polewright.example' }),

  ofPerson('server/api/auth/sessions/index.get.ts', { target: () => ({ path: '/api/auth/sessions' }) }),
  ofPerson('server/api/auth/sessions/[id].delete.ts', {
    target: async (firm) => {
      const { id } = await openSessionFor(firm.engineer)
      return { path: `/api/auth/sessions/${id}` }
    },
    expect: { 'client of another organisation': 404, 'engineer who is no member': 404, 'wrong role': 404 },
    foreign: 404,
  }),
  // Who is signed in gets as far as the present password, which is not the right one here.
  ofPerson('server/api/auth/password.post.ts', {
    target: () => ({ path: '/api/auth/password', body: { current: 'not the present one', next: PASSWORD } }),
    expect: { 'client of another organisation': 403, 'engineer who is no member': 403, 'wrong role': 403, 'right role': 403 },
  }),

  ofFirm('server/api/people/index.get.ts', { right: 'manager', wrong: 'checker', target: () => ({ path: '/api/people' }) }),
  ofFirm('server/api/people/index.post.ts', { right: 'manager', wrong: 'checker', target: () => ({ path: '/api/people', body: someone() }) }),
  ofFirm('server/api/people/[id].patch.ts', {
    right: 'manager',
    wrong: 'checker',
    target: firm => ({ path: `/api/people/${firm.colleague.id}`, body: { initials: 'XY' } }),
  }),
  ofFirm('server/api/people/[id]/invite.post.ts', {
    right: 'manager',
    wrong: 'checker',
    target: async (firm) => {
      const { body } = await firm.manager.api.post<{ id: string }>('/api/people', someone())
      return { path: `/api/people/${body.id}/invite` }
    },
  }),
  ofFirm('server/api/organisations/index.get.ts', { right: 'manager', wrong: 'engineer', target: () => ({ path: '/api/organisations' }) }),
  ofFirm('server/api/organisations/index.post.ts', {
    right: 'manager',
    wrong: 'engineer',
    target: () => ({ path: '/api/organisations', body: { name: unique('Client ') } }),
  }),
  ofFirm('server/api/organisations/[id].patch.ts', {
    right: 'manager',
    wrong: 'engineer',
    target: firm => ({ path: `/api/organisations/${firm.client.organisationId}`, body: { name: unique('Client ') } }),
  }),
]
