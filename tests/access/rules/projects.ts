/** Projects, registers and lists. Managers see every project of the firm, so what is theirs alone has no foreign counterpart. */
import { ofFirm, ofProject } from '../rule'
import type { Rule, Who } from '../rule'
import { attachment, picture, reference, referenceOf, unique } from '../world'

/** A manager of the firm who is not authorised for this project. */
const otherManager: Who = world => world.foreign.manager

const change = (firm: { engineer: { id: string }, manager: { id: string }, checker: { id: string }, colleague: { id: string }, secondChecker: { id: string }, secondManager: { id: string } }) => ({
  memberIds: [firm.engineer, firm.colleague, firm.checker, firm.secondChecker].map(one => one.id),
  managerIds: [firm.manager, firm.secondManager].map(one => one.id),
})

export const projects: Rule[] = [
  ofFirm('server/api/projects/index.get.ts', {
    right: 'engineer',
    wrong: 'client',
    target: () => ({ path: '/api/projects' }),
    expect: { 'engineer who is no member': 200 },
    hidden: { from: ['engineer who is no member'], text: world => world.own.projectId },
  }),
  ofFirm('server/api/projects/index.post.ts', {
    right: 'manager',
    wrong: 'engineer',
    target: firm => ({ path: '/api/projects', body: { jobNumber: unique('J'), title: 'Shore supply', clientId: firm.client.organisationId, memberIds: [], managerIds: [firm.manager.id] } }),
  }),
  ofProject('server/api/projects/[id]/index.get.ts', {
    right: 'engineer', wrong: 'client', expect: { 'wrong role': 404 }, target: firm => ({ path: `/api/projects/${firm.projectId}` }),
  }),
  ofProject('server/api/projects/[id]/index.patch.ts', {
    right: 'manager', wrong: 'engineer', foreign: null, target: firm => ({ path: `/api/projects/${firm.projectId}`, body: { title: 'Shore supply, berth 4' } }),
  }),
  ofProject('server/api/projects/[id]/members.put.ts', {
    right: 'manager', wrong: 'engineer', foreign: null, target: firm => ({ path: `/api/projects/${firm.projectId}/members`, body: change(firm) }),
  }),
  ofProject('server/api/projects/[id]/register.get.ts', {
    right: 'engineer', wrong: 'client', expect: { 'wrong role': 404 }, target: firm => ({ path: `/api/projects/${firm.projectId}/register` }),
  }),
  ofProject('server/api/projects/[id]/candidates.get.ts', {
    right: 'engineer', wrong: 'client', expect: { 'wrong role': 404 }, target: firm => ({ path: `/api/projects/${firm.projectId}/candidates` }),
  }),
  ofProject('server/api/projects/[id]/sheets.post.ts', {
    right: 'engineer', wrong: otherManager, target: firm => ({ path: `/api/projects/${firm.projectId}/sheets`, body: { number: unique('S-'), title: 'Input filter' } }),
  }),
  ofProject('server/api/projects/[id]/attachments.post.ts', {
    right: 'engineer', wrong: otherManager, target: firm => ({ path: `/api/projects/${firm.projectId}/attachments`, body: picture() }),
  }),
  ofProject('server/api/attachments/[id].get.ts', {
    right: 'engineer', wrong: 'client', expect: { 'wrong role': 404 }, target: async firm => ({ path: `/api/attachments/${await attachment(firm)}` }),
  }),
  ofProject('server/api/projects/[id]/references/index.get.ts', {
    right: 'engineer', wrong: 'client', expect: { 'wrong role': 404 }, target: firm => ({ path: `/api/projects/${firm.projectId}/references` }),
  }),
  ofProject('server/api/projects/[id]/references/index.post.ts', {
    right: 'engineer', wrong: otherManager, target: firm => ({ path: `/api/projects/${firm.projectId}/references`, body: reference() }),
  }),
  ofProject('server/api/projects/[id]/references/[rid].patch.ts', {
    right: 'engineer', wrong: otherManager, target: async firm => ({ path: `/api/projects/${firm.projectId}/references/${await referenceOf(firm)}`, body: reference() }),
  }),
  ofProject('server/api/projects/[id]/references/[rid].delete.ts', {
    right: 'engineer', wrong: otherManager, target: async firm => ({ path: `/api/projects/${firm.projectId}/references/${await referenceOf(firm)}` }),
  }),

  ofFirm('server/api/work.get.ts', {
    right: 'engineer', wrong: 'client', expect: { 'engineer who is no member': 200 }, target: () => ({ path: '/api/work' }),
    hidden: { from: ['engineer who is no member'], text: world => world.own.projectId },
  }),
  ofFirm('server/api/queue.get.ts', { right: 'checker', wrong: 'engineer', target: () => ({ path: '/api/queue' }) }),
  ofFirm('server/api/board.get.ts', { right: 'manager', wrong: 'engineer', target: () => ({ path: '/api/board' }) }),
  ofFirm('server/api/issued.get.ts', {
    right: 'client', wrong: 'engineer', expect: { 'client of another organisation': 200 }, target: () => ({ path: '/api/issued' }),
    hidden: { from: ['client of another organisation'], text: world => world.own.projectId },
  }),
  ofFirm('server/api/outbox/index.get.ts', {
    right: 'engineer', wrong: 'client', expect: { 'engineer who is no member': 200 }, target: () => ({ path: '/api/outbox' }),
  }),
]
