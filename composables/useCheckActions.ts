import type { Ability, RevisionAbility, RevisionView } from '#shared/types/api'
import type { RevisionState } from '#shared/workflow/revision'
import type { Action } from './useActions'

export type CheckDialogName = 'return' | 'sign' | 'recall' | 'approve' | 'revise' | 'withdraw' | 'cancel'

/** Steps that a state may lead to, the first one that this person may take being the one to do now. */
const STEPS: Record<RevisionState, readonly RevisionAbility[]> = {
  draft: [],
  for_checking: ['sign', 'return', 'recall'],
  checked: ['approve', 'return'],
  issuing: [],
  issued: ['download', 'revise', 'withdraw'],
  superseded: ['download', 'withdraw'],
  withdrawn: ['download', 'revise'],
  cancelled: [],
}

const LABELS: Partial<Record<RevisionAbility, { label: string, keys?: string }>> = {
  sign: { label: 'Sign as checked…', keys: 'Alt+S' },
  return: { label: 'Return to the author…', keys: 'Alt+R' },
  recall: { label: 'Recall…' },
  approve: { label: 'Approve and issue…', keys: 'Alt+S' },
  download: { label: 'Download the PDF', keys: 'Alt+D' },
  revise: { label: 'Start the next revision…' },
  withdraw: { label: 'Withdraw…' },
}

export interface CheckActionContext {
  revision: Readonly<Ref<RevisionView | null | undefined>>
  /** What stands between the checker and the signature. */
  missing: Readonly<Ref<string | null>>
  isChecker: Readonly<Ref<boolean>>
  selected: Readonly<Ref<string | null>>
  open: (name: CheckDialogName) => void
  next: (by: 1 | -1) => void
  tick: () => void
  annotate: () => void
}

const whyNot = (ability: Ability) => ability.may ? null : ability.why

/** What can be done on a sheet that is not a draft: all of it for Actions, the one thing to do now for the bar, the rest as buttons. */
export function useCheckActions(context: CheckActionContext) {
  const steps = computed<Action[]>(() => {
    const revision = context.revision.value
    if (!revision) return []
    return STEPS[revision.state].flatMap((step): Action[] => {
      const words = LABELS[step]
      if (!words) return []
      const missing = step === 'sign' && context.isChecker.value ? context.missing.value : null
      const run = step === 'download' ? () => { window.location.assign(`/api/revisions/${revision.id}/pdf`) } : () => context.open(step as CheckDialogName)
      return [{ id: `step-${step}`, group: 'This sheet', ...words, why: missing ?? whyNot(revision.abilities[step]), run }]
    })
  })

  const lineActions = computed<Action[]>(() => {
    const abilities = context.revision.value?.abilities
    if (!abilities) return []
    const none = context.selected.value === null ? 'no line is chosen: J goes to the first' : null
    return [
      { id: 'line-next', group: 'Lines', label: 'Next line', keys: 'J', run: () => context.next(1) },
      { id: 'line-previous', group: 'Lines', label: 'Previous line', keys: 'K', run: () => context.next(-1) },
      { id: 'line-tick', group: 'Lines', label: 'Tick this line, or take the tick away', keys: 'T', why: whyNot(abilities.tick) ?? none, run: context.tick },
      { id: 'line-annotate', group: 'Lines', label: 'Annotate this line or the selected text', keys: 'A', why: whyNot(abilities.annotate) ?? none, run: context.annotate },
    ]
  })

  /** The checker sees the signature even while something is missing; everyone else the first step that is theirs. */
  const primary = computed(() =>
    steps.value.find(step => (step.id === 'step-sign' && context.isChecker.value) || (!step.why && step.id !== 'step-recall' && step.id !== 'step-return')) ?? null)
  const others = computed(() => steps.value.filter(step => !step.why && step.id !== primary.value?.id))
  const actions = computed(() => [...lineActions.value, ...steps.value])

  return { actions, primary, others }
}
