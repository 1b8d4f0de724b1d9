/** What follows on an issue, once the server has made its file: a next revision, a withdrawal. May be run again at any time. */
import { setTimeout as delay } from 'node:timers/promises'
import type { RevisionState } from '#shared/workflow/revision'
import { reviseSheet } from '../../commands/revisions/reviseSheet'
import { withdrawRevision } from '../../commands/revisions/withdrawRevision'
import { during } from '../../utils/clock'
import { Sheet } from '../models/projects'
import { Revision } from '../models/revisions'
import { loadCast, type Cast } from './people'
import { inputFilter } from './sheets/ferry'
import { approve, daysAgo, inDays, sign, submit, writeDocument } from './steps'

const POLL = 500
const TRIES = 600

async function revisionsOf(number: string): Promise<Revision[]> {
  const sheet = await Sheet.findOne({ where: { number } })
  return sheet ? Revision.findAll({ where: { sheetId: sheet.id }, order: [['ordinal', 'ASC']] }) : []
}

/** The first revision of a sheet, when it is alone and issued; null when this part of the story has been told already. */
async function firstIssued(number: string): Promise<Revision | null> {
  for (let attempt = 0; attempt < TRIES; attempt++) {
    const [first, next] = await revisionsOf(number)
    const settled: RevisionState[] = ['issued']
    if (!first || next || (first.state !== 'issuing' && !settled.includes(first.state))) return null
    if (settled.includes(first.state)) return first
    await delay(POLL)
  }
  throw new Error(`Sheet ${number} was not issued in time.`)
}

async function nextInputFilter({ ines, marta, ruth }: Cast['people']): Promise<void> {
  const first = await firstIssued('F-101')
  if (!first) return
  const next = await during(daysAgo(19), () => reviseSheet(ines, first.id, { reason: 'Resistor of the damping leg lowered to the optimum after the bench test of 10 November.' }))
  await during(daysAgo(18), () => writeDocument(ines, next, inputFilter))
  await submit(ines, next, marta, daysAgo(17), inDays(-12))
  await sign(marta, next, daysAgo(13))
  await approve(ruth, next, daysAgo(12), 'construction')
}

async function openOutputFilter({ tomas }: Cast['people']): Promise<void> {
  const first = await firstIssued('A-301')
  if (first) await during(daysAgo(3), () => reviseSheet(tomas, first.id, { reason: 'The light load becomes a single loudspeaker on platform 2.' }))
}

async function withdrawLine({ ruth }: Cast['people']): Promise<void> {
  const first = await firstIssued('A-302')
  if (first) await during(daysAgo(10), () => withdrawRevision(ruth, first.id, { version: first.version, reason: 'The loudspeakers were changed to a type with its own filter.' }))
}

export async function continueDemonstration(): Promise<void> {
  const { people } = await loadCast()
  await nextInputFilter(people)
  await openOutputFilter(people)
  await withdrawLine(people)
}
