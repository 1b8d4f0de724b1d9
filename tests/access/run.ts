/** Started by scripts/check-access.mjs. Prints what is wrong, and ends with the line `N passed, M failed`. */
import { useBase } from '../helpers/base'
import { launch } from '../helpers/launch'
import { tryRoute } from './http'
import { routeFiles } from './routes'
import { RULES } from './rules'
import { trySocket } from './socket'
import { Tally } from './tally'
import { createWorld } from './world'

function compareWithTree(tally: Tally): void {
  const ruled = new Set(RULES.map(rule => rule.file))
  const files = routeFiles()
  for (const file of files) tally.check(ruled.has(file), file, () => 'no rule in tests/access/rules says who may use this route')
  for (const file of ruled) if (!files.includes(file)) tally.fail(file, 'a rule, but no such route')
}

const tally = new Tally()
const { base, stop } = await launch('access')
useBase(base)
try {
  compareWithTree(tally)
  const world = await createWorld()
  for (const rule of RULES.filter(one => routeFiles().includes(one.file))) await tryRoute(rule, world, tally)
  await trySocket(world, tally)
}
finally {
  const { sequelize } = await import('../../server/database')
  await sequelize.close()
  await stop()
}
console.log(`${tally.passed} passed, ${tally.failed} failed`)
process.exit(tally.failed === 0 ? 0 : 1)
