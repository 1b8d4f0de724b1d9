import { Linter } from 'eslint'
import { describe, expect, it } from 'vitest'
import { walls } from '../../../scripts/lint/walls.mjs'

const lint = (filename: string, source: string) => new Linter({ cwd: process.cwd() }).verify(`import ${JSON.stringify(source)}`, [{
  files: ['**/*.ts'],
  plugins: { polewright: { rules: { walls } } },
  rules: { 'polewright/walls': 'error' },
}], { filename: `${process.cwd()}/${filename}` }).map(found => found.message)

describe('import walls', () => {
  it.each([
    ['components/sheet/Pad.ts', '~/server/database/connection'],
    ['composables/useEngine.ts', '../components/ui/Button.vue'],
    ['shared/policies/revision.ts', '#shared/../server/utils/ids'],
    ['shared/engine/index.ts', 'vue'],
    ['shared/engine/graph/order.ts', '../../document/types'],
    ['shared/engine/index.ts', 'node:fs'],
    ['server/commands/submitRevision.ts', 'h3'],
    ['server/commands/submitRevision.ts', '~/server/api/health.get'],
    ['server/collab/room.ts', '../commands/submitRevision'],
    ['shared/workflow/revision.ts', '~/stores/session'],
  ])('%s may not import %s', (file, source) => {
    expect(lint(file, source)).toHaveLength(1)
  })

  it.each([
    ['components/sheet/Pad.ts', '#shared/engine'],
    ['pages/work.ts', '~/components/ui/Button.vue'],
    ['shared/engine/index.ts', 'mathjs/number'],
    ['shared/engine/graph/order.ts', '../types'],
    ['shared/engine/numeric/math.ts', '@stdlib/math-base-special-sin'],
    ['server/api/people/index.get.ts', '~/server/commands/invitePerson'],
    ['server/api/people/index.get.ts', 'h3'],
    ['server/collab/room.ts', '~/server/database/connection'],
  ])('%s may import %s', (file, source) => {
    expect(lint(file, source)).toEqual([])
  })
})
