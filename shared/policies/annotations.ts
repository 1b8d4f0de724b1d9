import { isMember } from './projects'
import { allOf, isStaff, MAY, mayNot, type Actor } from './actor'
import { hadAHand, see, type RevisionFacts } from './revisions'
import type { Ability, AnnotationState } from '../types/api'

export interface AnnotationFacts { state: AnnotationState, byId: string, revision: RevisionFacts }

const underCheck = ({ revision }: AnnotationFacts) => revision.state === 'for_checking' || revision.state === 'draft'

const stillOpenToWords = (annotation: AnnotationFacts): Ability =>
  underCheck(annotation) ? MAY : mayNot('The check of this revision is over.', 'wrong_state')

/** The preparing side and the checker, while it is a draft or under check. */
export const reply = (actor: Actor, annotation: AnnotationFacts): Ability => allOf(
  () => see(actor, annotation.revision),
  () => (isStaff(actor) && (isMember(actor, annotation.revision.project) || annotation.revision.checkerId === actor.id) ? MAY : mayNot('Only members of the project and its checker answer.')),
  () => (annotation.state === 'closed' ? mayNot('It is closed. Open it again to answer.', 'wrong_state') : MAY),
  () => stillOpenToWords(annotation),
)

/** Who raised it or checks now; never one who had a hand in the sheet. */
const keepsIt = (actor: Actor, annotation: AnnotationFacts): Ability =>
  isStaff(actor) && (annotation.byId === actor.id || annotation.revision.checkerId === actor.id) && !hadAHand(actor.id, annotation.revision)
    ? MAY
    : mayNot('Who raised it or the present checker does this.')

export const close = (actor: Actor, annotation: AnnotationFacts): Ability => allOf(
  () => see(actor, annotation.revision),
  () => keepsIt(actor, annotation),
  () => (annotation.state === 'closed' ? mayNot('It is closed already.', 'wrong_state') : MAY),
  () => stillOpenToWords(annotation),
)

export const reopen = (actor: Actor, annotation: AnnotationFacts): Ability => allOf(
  () => see(actor, annotation.revision),
  () => keepsIt(actor, annotation),
  () => (annotation.state === 'closed' ? MAY : mayNot('It is open.', 'wrong_state')),
  () => stillOpenToWords(annotation),
)
