/** What is wrong with expressions typed in a form, checked by the engine in the scope of the whole sheet. */
export function useEngineExpressions<Name extends string>(expressions: () => Record<Name, string>) {
  const { engine } = useSheetEditorContext()
  const problems = shallowRef<Partial<Record<Name, string>>>({})

  async function check() {
    const entries = Object.entries(expressions()) as [Name, string][]
    const found = await Promise.all(entries.map(async ([name, source]) =>
      [name, source.trim() === '' ? null : await engine.problemOf(`${name} ${source}`, source)] as const))
    problems.value = Object.fromEntries(found.filter(([, problem]) => problem !== null)) as Partial<Record<Name, string>>
  }
  watch(() => [engine.round.value, JSON.stringify(expressions())], () => { void check() }, { immediate: true })

  return { problems: shallowReadonly(problems) }
}
