/** The curves of one response block, asked from the engine whenever the sheet or the block's range changes while it is near the screen. */
import type { ResponseAttributes } from '#shared/document/types'
import type { ResponseFigures, StepFigures } from '#shared/engine/types'

const POINTS = 400

export function useEngineFigures(attributes: Readonly<Ref<ResponseAttributes>>, near: Readonly<Ref<boolean>>) {
  const { engine } = useSheetEditorContext()
  const response = shallowRef<ResponseFigures | null>(null)
  const step = shallowRef<StepFigures | null>(null)
  const failed = ref<string | null>(null)

  async function ask() {
    const { id, transfer, from, to, showStep, duration } = attributes.value
    try {
      const [curves, steps] = await Promise.all([
        engine.response(id, { transfer, from, to, points: POINTS }),
        showStep ? engine.step(id, { transfer, duration, points: POINTS }) : null,
      ])
      if (curves) response.value = curves
      if (steps || !showStep) step.value = steps
      failed.value = null
    }
    catch (error) {
      failed.value = error instanceof Error ? error.message : 'The response could not be computed.'
    }
  }

  const wanted = computed(() => {
    const { transfer, from, to, showStep, duration } = attributes.value
    return near.value && transfer ? JSON.stringify([engine.round.value, transfer, from, to, showStep, duration]) : null
  })
  watch(wanted, (now, before) => { if (now !== null && now !== before) void ask() }, { immediate: true })

  return { response: shallowReadonly(response), step: shallowReadonly(step), failed: readonly(failed) }
}
