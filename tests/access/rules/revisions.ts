/** Revisions in every state, the check, the stamped file, verification. */
import { ofProject, open } from '../rule'
import type { Rule, Target, Who } from '../rule'
import {
  annotated, annotation, approval, checked, closedAnnotation, createDraft, frozen, issuedWithFile, signing, submission, submitted, ticked, view,
} from '../world'
import type { Firm } from '../world'
import { PASSWORD } from '../../helpers/people'

/** A manager of the firm who is not authorised for this project. */
const otherManager: Who = world => world.foreign.manager

type Make = (firm: Firm) => Promise<string>

/** A route on a revision that `make` brings to the right state; `body` is what the right person would send. */
const on = (make: Make, path: string, body?: (firm: Firm, id: string) => Promise<unknown> | unknown) => async (firm: Firm): Promise<Target> => {
  const id = await make(firm)
  return { path: `/api/revisions/${id}${path}`, body: await body?.(firm, id) }
}

const draft: Make = firm => createDraft(firm)
const underCheck: Make = firm => submitted(firm)
const whenChecked: Make = firm => checked(firm)
const version = async (firm: Firm, id: string) => ({ version: (await view(firm.engineer, id)).version })

export const revisions: Rule[] = [
  ofProject('server/api/revisions/[id]/index.get.ts', { right: 'engineer', wrong: 'client', expect: { 'wrong role': 404 }, target: on(draft, '') }),
  ofProject('server/api/revisions/[id]/index.patch.ts', { right: 'engineer', wrong: otherManager, target: on(draft, '', () => ({ title: 'Input filter, berth 4' })) }),
  ofProject('server/api/revisions/[id]/submit-review.get.ts', { right: 'engineer', wrong: 'colleague', target: on(draft, '/submit-review') }),
  ofProject('server/api/revisions/[id]/submit.post.ts', {
    right: 'engineer', wrong: 'colleague', target: on(draft, '/submit', (firm, id) => submission(firm.engineer, id, firm.checker)),
  }),
  ofProject('server/api/revisions/[id]/cancel.post.ts', { right: 'engineer', wrong: 'colleague', target: on(draft, '/cancel', version) }),
  ofProject('server/api/revisions/[id]/recall.post.ts', { right: 'engineer', wrong: 'colleague', target: on(underCheck, '/recall', version) }),
  ofProject('server/api/revisions/[id]/return.post.ts', {
    right: 'checker', wrong: 'engineer', target: on(underCheck, '/return', async (firm, id) => ({ ...await frozen(firm.checker, id), reason: 'The source impedance is missing.' })),
  }),
  ofProject('server/api/revisions/[id]/reassign.post.ts', {
    right: 'manager', wrong: 'engineer', foreign: null,
    target: on(underCheck, '/reassign', async (firm, id) => ({ ...await version(firm, id), checkerId: firm.secondChecker.id, due: null })),
  }),
  ofProject('server/api/revisions/[id]/sign.post.ts', { right: 'checker', wrong: 'secondChecker', target: on(ticked, '/sign', (firm, id) => signing(firm.checker, id)) }),
  ofProject('server/api/revisions/[id]/approve.post.ts', {
    right: 'manager', wrong: 'engineer', foreign: 403, target: on(whenChecked, '/approve', (firm, id) => approval(firm.manager, id)),
  }),
  ofProject('server/api/revisions/[id]/withdraw.post.ts', {
    right: 'manager', wrong: 'engineer', foreign: 403,
    target: on(issuedWithFile, '/withdraw', async (firm, id) => ({ ...await version(firm, id), reason: 'The cable was changed.', password: PASSWORD })),
  }),
  ofProject('server/api/revisions/[id]/revise.post.ts', {
    right: 'engineer', wrong: otherManager, target: on(issuedWithFile, '/revise', () => ({ reason: 'The cable was changed.' })),
  }),

  ofProject('server/api/revisions/[id]/submission.get.ts', { right: 'checker', wrong: 'client', expect: { 'wrong role': 404 }, target: on(underCheck, '/submission') }),
  ofProject('server/api/revisions/[id]/check.get.ts', { right: 'engineer', wrong: 'client', expect: { 'wrong role': 404 }, target: on(underCheck, '/check') }),
  ofProject('server/api/revisions/[id]/ticks/[lineId].put.ts', { right: 'checker', wrong: 'secondChecker', target: on(underCheck, '/ticks/r') }),
  ofProject('server/api/revisions/[id]/ticks/[lineId].delete.ts', { right: 'checker', wrong: 'secondChecker', target: on(ticked, '/ticks/r') }),
  ofProject('server/api/revisions/[id]/annotations.post.ts', { right: 'checker', wrong: 'engineer', target: on(underCheck, '/annotations', annotation) }),
  ofProject('server/api/annotations/[id]/replies.post.ts', {
    right: 'engineer', wrong: otherManager, target: async firm => ({ path: `/api/annotations/${await annotated(firm)}/replies`, body: { text: 'For 40 °C.' } }),
  }),
  ofProject('server/api/annotations/[id]/close.post.ts', {
    right: 'checker', wrong: 'engineer', target: async firm => ({ path: `/api/annotations/${await annotated(firm)}/close` }),
  }),
  ofProject('server/api/annotations/[id]/reopen.post.ts', {
    right: 'checker', wrong: 'engineer', target: async firm => ({ path: `/api/annotations/${await closedAnnotation(firm)}/reopen` }),
  }),

  ofProject('server/api/revisions/[id]/pdf.get.ts', { right: 'client', wrong: 'outsider', expect: { 'wrong role': 404 }, target: on(issuedWithFile, '/pdf') }),
  ofProject('server/api/revisions/[id]/recipients.get.ts', { right: 'engineer', wrong: 'client', target: on(issuedWithFile, '/recipients') }),
  open('server/api/verify/[code].get.ts', '/api/verify/ABCDE-FGHJK-MNPQR-STVWX', 200),
  // The token is made for the server's own browser; nobody else has one.
  open('server/api/print/[token].get.ts', `/api/print/${'A'.repeat(43)}`, 404),
  open('server/routes/collaboration/[revision].get.ts', '/collaboration/00000000000000000000000000?epoch=0', 426),
]
