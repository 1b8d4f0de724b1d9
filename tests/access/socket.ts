/** The live-editing socket with every kind of caller: who may write is asked for its state, who may not is closed with the reason. */
import WebSocket from 'ws'
import { CLOSE, MESSAGE_SYNC } from '../../shared/collab/messages'
import { DOCUMENT_FORMAT } from '../../shared/document/types'
import { base } from '../helpers/base'
import { clientOf } from './callers'
import { CALLERS } from './rule'
import type { Caller, Rule } from './rule'
import type { Tally } from './tally'
import { createDraft, view } from './world'
import type { Firm, World } from './world'

const PATIENCE = 10_000

/** `open` when the server begins to speak, else the close code or the refused upgrade's status. */
function outcome(path: string, headers: Record<string, string>): Promise<string> {
  return new Promise((resolve) => {
    const socket = new WebSocket(base().url.replace('http', 'ws') + path, { headers })
    const settle = (what: string) => {
      clearTimeout(late)
      socket.removeAllListeners()
      socket.on('error', () => {})
      socket.terminate()
      resolve(what)
    }
    const late = setTimeout(() => settle('silence'), PATIENCE)
    socket.on('message', (data: Buffer) => data[0] === MESSAGE_SYNC && settle('open'))
    socket.on('close', code => settle(`closed ${code}`))
    socket.on('unexpected-response', (_, response) => settle(`refused ${response.statusCode}`))
    socket.on('error', error => settle(`error ${error.message}`))
  })
}

const EXPECTED: Record<Caller, string> = {
  'nobody': `closed ${CLOSE.signedOut}`,
  'client of another organisation': `closed ${CLOSE.notFound}`,
  'engineer who is no member': `closed ${CLOSE.notFound}`,
  // The project's own client does not see a draft.
  'wrong role': `closed ${CLOSE.notFound}`,
  'right role': 'open',
}

const WHO: Pick<Rule, 'right' | 'wrong'> = { right: world => world.own.engineer, wrong: world => world.own.client }

async function address(firm: Firm): Promise<string> {
  const id = await createDraft(firm)
  const { epoch } = await view(firm.engineer, id)
  return `/collaboration/${id}?epoch=${epoch}&format=${DOCUMENT_FORMAT}`
}

export async function trySocket(world: World, tally: Tally): Promise<void> {
  const [own, foreign] = [await address(world.own), await address(world.foreign)]
  const attempt = async (what: string, expected: string, caller: Caller, path: string, origin = base().url) => {
    const { cookieHeader } = await clientOf(caller, WHO, world)
    const found = await outcome(path, { origin, ...cookieHeader ? { cookie: cookieHeader } : {} })
    tally.check(found === expected, `socket, ${what}`, () => `expected ${expected}, got ${found}`)
  }
  for (const caller of CALLERS) await attempt(caller, EXPECTED[caller], caller, own)
  await attempt('another project\'s sheet', `closed ${CLOSE.notFound}`, 'right role', foreign)
  await attempt('a sheet that is not there', `closed ${CLOSE.notFound}`, 'right role', own.replace(/[0-9A-Z]{26}/, '00000000000000000000000000'))
  await attempt('from another site', 'refused 403', 'right role', own, 'https://elsewhere.example')
  await attempt('another path', 'refused 404', 'right role', '/elsewhere')
}
