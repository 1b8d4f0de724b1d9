/** Every route with every kind of caller, on the firm's own objects and on foreign ones. */
import { clientOf } from './callers'
import { CALLERS } from './rule'
import type { Expectation, Rule, Target } from './rule'
import type { Tally } from './tally'
import type { World } from './world'

const NO_SUCH_ID = '00000000000000000000000000'

const meets = (expected: Expectation, status: number) => typeof expected === 'number' ? expected === status : expected.includes(status)

const words = (expected: Expectation, status: number, body: string) => `expected ${[expected].flat().join(' or ')}, got ${status} ${body.slice(0, 200).replace(/\s+/g, ' ')}`

/** A form can be read once, so each request gets a copy. */
const copyOf = (body: unknown): unknown => {
  if (!(body instanceof FormData)) return body
  const copy = new FormData()
  for (const [name, value] of body) copy.append(name, value)
  return copy
}

async function ask(rule: Rule, client: Awaited<ReturnType<typeof clientOf>>, { path, body }: Target) {
  const response = await client.raw(rule.method, path, copyOf(body))
  return { status: response.status, text: await response.text() }
}

async function tryOwn(rule: Rule, world: World, tally: Tally): Promise<void> {
  const target = await rule.target(world.own, world)
  for (const caller of CALLERS) {
    const { status, text } = await ask(rule, await clientOf(caller, rule, world), target)
    tally.check(meets(rule.expect[caller], status), `${rule.method} ${rule.file}, ${caller}`, () => words(rule.expect[caller], status, text))
    if (rule.hidden?.from.includes(caller)) {
      tally.check(!text.includes(rule.hidden.text(world)), `${rule.file}, ${caller}, what is not theirs`, () => 'it is in the answer')
    }
  }
}

/** The right person, where the thing belongs to others; and where there is nothing at all. */
async function tryForeign(rule: Rule, world: World, tally: Tally): Promise<void> {
  if (rule.foreign === null) return
  const client = await clientOf('right role', rule, world)
  const target = await rule.target(world.foreign, world)
  const foreign = await ask(rule, client, target)
  tally.check(meets(rule.foreign, foreign.status), `${rule.method} ${rule.file}, another project's`, () => words(rule.foreign!, foreign.status, foreign.text))
  const nowhere = { ...target, path: target.path.replace(/[0-9A-HJKMNP-TV-Z]{26}/, NO_SUCH_ID) }
  const absent = await ask(rule, client, nowhere)
  tally.check(absent.status === 404, `${rule.method} ${rule.file}, one that is not there`, () => words(404, absent.status, absent.text))
}

/** A write that another site's page sends with the right person's cookie. */
async function tryForeignOrigin(rule: Rule, world: World, tally: Tally): Promise<void> {
  if (rule.method === 'GET') return
  const client = await clientOf('right role', rule, world)
  const response = await client.raw(rule.method, `/api/${NO_SUCH_ID}`, undefined, { headers: { origin: 'https://elsewhere.example' } })
  tally.check(response.status === 403, `${rule.method} ${rule.file}, from another site`, () => `got ${response.status}`)
}

export async function tryRoute(rule: Rule, world: World, tally: Tally): Promise<void> {
  try {
    await tryOwn(rule, world, tally)
    await tryForeign(rule, world, tally)
    await tryForeignOrigin(rule, world, tally)
  }
  catch (error) {
    tally.fail(`${rule.method} ${rule.file}`, `it could not be tried: ${error instanceof Error ? error.message : String(error)}`)
  }
}
