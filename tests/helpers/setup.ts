/** Once before the API, collaboration, PDF and browser tests. */
import type { TestProject } from 'vitest/node'
import type { TestBase } from './base'
import { launch } from './launch'

declare module 'vitest' {
  export interface ProvidedContext { base: TestBase }
}

export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const { base, stop } = await launch(project.name)
  project.provide('base', base)
  return stop
}
