/**
 * The import walls as one lint rule. Arrows point one way:
 * pages → components → composables and stores → shared, and server/api → commands → database and collab → shared.
 */
import { dirname, relative, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

const ROOT = fileURLToPath(new URL('../..', import.meta.url))

const CLIENT = ['pages', 'layouts', 'components', 'composables', 'stores', 'middleware', 'plugins', 'workers']
const FORBIDDEN = [
  { from: [...CLIENT, 'app.vue', 'error.vue'], to: ['server', 'tests', 'scripts'], why: 'client code never imports the server' },
  { from: ['components', 'composables', 'stores', 'workers'], to: ['pages', 'layouts'], why: 'pages stand above components and composables' },
  { from: ['composables', 'stores', 'workers'], to: ['components'], why: 'components stand above composables and stores' },
  { from: ['shared'], to: [...CLIENT, 'server', 'tests', 'scripts'], why: 'shared code imports only shared code' },
  { from: ['server'], to: [...CLIENT, 'tests'], why: 'the server imports only shared code' },
  { from: ['server/commands', 'server/database', 'server/collab', 'server/presenters'], to: ['server/api', 'server/routes', 'server/middleware'], why: 'routes stand above commands' },
  { from: ['server/database/models', 'server/database/migrations', 'server/collab'], to: ['server/commands'], why: 'commands stand above the database and the rooms' },
]

const inside = (path, folder) => path === folder || path.startsWith(`${folder}/`)

/** The imported file relative to the project's root, or null for a package. */
function target(source, file) {
  if (source.startsWith('.')) return relative(ROOT, resolve(dirname(file), source))
  const alias = /^(?:~~|~|@@|@)\/(.*)$/.exec(source)
  const path = alias ? alias[1] : source.startsWith('#shared/') ? source.slice(1) : null
  return path === null ? null : relative(ROOT, resolve(ROOT, path))
}

function refusal(source, file) {
  const from = relative(ROOT, file)
  const to = target(source, file)
  if (inside(from, 'shared/engine')) {
    if (to === null) return /^(mathjs|@stdlib\/math-base-special-[a-z0-9]+)(\/|$)/.test(source) ? null : 'the engine imports only mathjs and @stdlib/math-base-special-*'
    return inside(to, 'shared/engine') ? null : 'the engine imports nothing outside shared/engine'
  }
  if (to === null) {
    const bannedPackage = inside(from, 'server/commands') && source === 'h3'
    return bannedPackage ? 'a command knows nothing of HTTP' : null
  }
  return FORBIDDEN.find(wall => wall.from.some(f => inside(from, f)) && wall.to.some(t => inside(to, t)))?.why ?? null
}

export const walls = {
  meta: { type: 'problem', schema: [], messages: { wall: '{{source}} may not be imported here: {{why}}.' } },
  create(context) {
    const check = (node) => {
      const source = node.source?.value
      if (typeof source !== 'string') return
      const why = refusal(source, context.filename)
      if (why) context.report({ node, messageId: 'wall', data: { source, why } })
    }
    return { ImportDeclaration: check, ImportExpression: check, ExportNamedDeclaration: check, ExportAllDeclaration: check }
  },
}
