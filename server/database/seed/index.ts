/** The demonstration: an invented firm, three jobs, a dozen sheets in every state. Loaded once, into an empty database. */
import type { Actor } from '#shared/policies/actor'
import { RELIANCE_NOTICE } from '#shared/schemas/projects'
import type { SheetDocument } from '#shared/document/types'
import { replyTo } from '../../commands/checks/threads'
import { createProject } from '../../commands/projects/createProject'
import { cancelRevision } from '../../commands/revisions/cancelRevision'
import { createSheet } from '../../commands/sheets/createSheet'
import { during } from '../../utils/clock'
import { createCast, type Cast } from './people'
import * as ferry from './sheets/ferry'
import * as pumping from './sheets/pumping'
import * as railway from './sheets/railway'
import { annotateLine, approve, daysAgo, inDays, sendBack, sign, submit, tick, writeDocument } from './steps'

interface Draft { number: string, title: string, by: Actor, when: Date, document: SheetDocument }

async function draft(projectId: string, { number, title, by, when, document }: Draft): Promise<string> {
  const { revisionId } = await during(when, () => createSheet(by, projectId, { number, title }))
  await during(when, () => writeDocument(by, revisionId, document))
  return revisionId
}

async function createJobs({ people, organisations }: Cast) {
  const { ines, tomas, marta, piet, ruth } = people
  const memberIds = [ines, tomas, marta, piet].map(one => one.id)
  const job = (jobNumber: string, title: string, clientId: string, when: Date) => during(when, () => createProject(ruth, {
    jobNumber, title, clientId, revisionScheme: 'letters', checkLevel: 2, relianceNotice: RELIANCE_NOTICE, memberIds, managerIds: [ruth.id],
  }))
  return {
    terminal: await job('2638', 'Norrsund ferry terminal, shore charging', organisations.ferries, daysAgo(58)),
    station: await job('2641', 'Calder pumping station, condition monitoring', organisations.water, daysAgo(44)),
    platforms: await job('2655', 'Tarn Valley platforms, public address', organisations.railway, daysAgo(40)),
  }
}

async function terminal(projectId: string, { ines, tomas, marta, piet, ruth }: Cast['people']): Promise<void> {
  const filter = await draft(projectId, { number: 'F-101', title: 'Auxiliary supply, input filter', by: ines, when: daysAgo(36), document: ferry.inputFilterFirst })
  await submit(ines, filter, marta, daysAgo(30), inDays(-24))
  await sign(marta, filter, daysAgo(27))
  await approve(ruth, filter, daysAgo(26), 'approval')

  const relay = await draft(projectId, { number: 'F-102', title: 'Control supply, switch-on of the pilot relay', by: ines, when: daysAgo(12), document: ferry.switchOn })
  await submit(ines, relay, marta, daysAgo(5), inDays(2))
  await tick(marta, relay, daysAgo(4), 0.6)
  const query = await annotateLine(marta, relay, daysAgo(4), 'L_m', 'must_change', 'Source for 0.65 µH/m? The cable is drawn as four cores, of which two are spare.')
  await during(daysAgo(3), () => replyTo(ines, query, 'Asked the maker for the measured value of the four-core type; the spare cores are open at both ends.'))
  await annotateLine(marta, relay, daysAgo(4), 'V_pk <=', 'query', 'Is the derating of 80 % agreed with the client for this controller?')

  const energy = await draft(projectId, { number: 'F-103', title: 'Charger, stored energy and discharge', by: tomas, when: daysAgo(33), document: ferry.discharge })
  await submit(tomas, energy, piet, daysAgo(29), inDays(-22))
  await sign(piet, energy, daysAgo(25))
  await approve(ruth, energy, daysAgo(24), 'construction')

  const pilot = await draft(projectId, { number: 'F-104', title: 'Control pilot, low-pass at the input', by: tomas, when: daysAgo(15), document: ferry.pilotLine })
  await submit(tomas, pilot, marta, daysAgo(9), inDays(-2), 'Shown to the checker as it stands, so that the two ways out can be discussed.')
  await annotateLine(marta, pilot, daysAgo(7), 'attenuation', 'must_change', 'Not met by far. Work out the two-section filter before this goes further.')
  await sendBack(marta, pilot, daysAgo(7), 'The attenuation is not met. Work out the second section; the edge of 30 µs is not agreed.')
}

async function station(projectId: string, { ines, tomas, marta, piet, ruth }: Cast['people']): Promise<void> {
  const alias = await draft(projectId, { number: 'V-201', title: 'Vibration channel, anti-alias filter', by: ines, when: daysAgo(38), document: pumping.antiAlias })
  await submit(ines, alias, marta, daysAgo(34), inDays(-28))
  await sign(marta, alias, daysAgo(32))
  await approve(ruth, alias, daysAgo(31), 'construction')

  const sections = await draft(projectId, { number: 'V-202', title: 'Temperature channel, two-section filter', by: tomas, when: daysAgo(18), document: pumping.twoSections })
  await submit(tomas, sections, piet, daysAgo(11), inDays(-4))
  await sign(piet, sections, daysAgo(3))

  const loop = await draft(projectId, { number: 'V-203', title: 'Level channel, current loop', by: ines, when: daysAgo(20), document: pumping.currentLoop })
  await submit(ines, loop, piet, daysAgo(14), inDays(-3))
  await tick(piet, loop, daysAgo(13), 0.3)

  await draft(projectId, { number: 'V-204', title: 'Vibration channel, drift filter', by: ines, when: daysAgo(2), document: pumping.driftFilter })
}

async function platforms(projectId: string, { ines, tomas, marta, piet, ruth }: Cast['people']): Promise<void> {
  const output = await draft(projectId, { number: 'A-301', title: 'Platform amplifier, output filter', by: tomas, when: daysAgo(31), document: railway.outputFilter })
  await submit(tomas, output, marta, daysAgo(25), inDays(-18))
  await sign(marta, output, daysAgo(22))
  await approve(ruth, output, daysAgo(21), 'approval')

  const line = await draft(projectId, { number: 'A-302', title: 'Loudspeaker line, high-pass', by: ines, when: daysAgo(30), document: railway.lineHighPass })
  await submit(ines, line, piet, daysAgo(26), inDays(-20))
  await sign(piet, line, daysAgo(23))
  await approve(ruth, line, daysAgo(20), 'information')

  const supply = await draft(projectId, { number: 'A-303', title: 'Preamplifier supply, ladder filter', by: ines, when: daysAgo(8), document: railway.supplyFilter })
  await submit(ines, supply, marta, daysAgo(1), inDays(6))

  await draft(projectId, { number: 'A-304', title: 'Concourse line, damping leg', by: tomas, when: daysAgo(4), document: railway.dampedLine })

  const { revisionId } = await during(daysAgo(19), () => createSheet(tomas, projectId, { number: 'A-305', title: 'Ticket hall, output filter' }))
  await during(daysAgo(17), () => cancelRevision(ruth, revisionId, { version: 1 }))
}

/** Everything but the files: an approved sheet is issued by the server's own job, and what follows on an issue comes after that (`later.ts`). */
export async function seedDemonstration(): Promise<void> {
  const cast = await createCast()
  const jobs = await createJobs(cast)
  await terminal(jobs.terminal, cast.people)
  await station(jobs.station, cast.people)
  await platforms(jobs.platforms, cast.people)
}
