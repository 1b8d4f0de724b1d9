import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize'
import type { AnnotationKind, AnnotationState } from '../../../shared/types/api'
import { at, count, day, hash, id, key, lineId, maybeAt, maybeCount, maybeKey, maybeOneOf, oneOf, table, text } from './columns'

export type CheckOutcome = 'signed' | 'returned' | 'recalled' | 'reassigned'

/** Who is asked to check a submission. One is open at a time: the newest without an end. */
export class Check extends Model<InferAttributes<Check>, InferCreationAttributes<Check>> {
  declare id: string
  declare submissionId: string
  declare checkerId: string
  declare askedBy: string
  declare dueDate: string | null
  declare createdAt: CreationOptional<Date>
  declare endedAt: CreationOptional<Date | null>
  declare outcome: CreationOptional<CheckOutcome | null>
}

/** A checker's mark on one line as it was, by its hash. */
export class Tick extends Model<InferAttributes<Tick>, InferCreationAttributes<Tick>> {
  declare submissionId: string
  declare lineId: string
  declare checkerId: string
  declare lineHash: string
  declare createdAt: CreationOptional<Date>
}

export class Annotation extends Model<InferAttributes<Annotation>, InferCreationAttributes<Annotation>> {
  declare id: string
  declare revisionId: string
  declare submissionId: string
  declare number: number
  declare kind: AnnotationKind
  declare state: CreationOptional<AnnotationState>
  declare byId: string
  declare text: string
  declare blockId: string | null
  declare quote: string
  declare fromPos: number | null
  declare toPos: number | null
  declare relFrom: CreationOptional<Buffer | null>
  declare relTo: CreationOptional<Buffer | null>
  declare closedBy: CreationOptional<string | null>
  declare closedAt: CreationOptional<Date | null>
  declare createdAt: CreationOptional<Date>
}

export class AnnotationReply extends Model<InferAttributes<AnnotationReply>, InferCreationAttributes<AnnotationReply>> {
  declare id: string
  declare annotationId: string
  declare byId: string
  declare text: string
  declare createdAt: CreationOptional<Date>
}

const position = () => ({ type: DataTypes.BLOB('tiny'), allowNull: true })

Check.init({
  id: id(), submissionId: key(), checkerId: key(), askedBy: key(), dueDate: day(), createdAt: at(), endedAt: maybeAt(),
  outcome: maybeOneOf('signed', 'returned', 'recalled', 'reassigned'),
}, table('checks'))
Tick.init({
  submissionId: { ...key(), primaryKey: true }, lineId: { ...lineId(), primaryKey: true }, checkerId: { ...key(), primaryKey: true },
  lineHash: hash(), createdAt: at(),
}, table('ticks'))
Annotation.init({
  id: id(), revisionId: key(), submissionId: key(), number: count(), kind: oneOf('must_change', 'query', 'remark'),
  state: { ...oneOf('open', 'answered', 'closed'), defaultValue: 'open' }, byId: key(), text: text(4000), blockId: { ...lineId(), allowNull: true },
  quote: text(2000), fromPos: maybeCount(), toPos: maybeCount(), relFrom: position(), relTo: position(),
  closedBy: maybeKey(), closedAt: maybeAt(), createdAt: at(),
}, table('annotations'))
AnnotationReply.init({ id: id(), annotationId: key(), byId: key(), text: text(4000), createdAt: at() }, table('annotation_replies'))
