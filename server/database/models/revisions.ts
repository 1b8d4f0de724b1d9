import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize'
import type { IssuePurpose } from '../../../shared/types/api'
import { REVISION_STATES, type RevisionState } from '../../../shared/workflow/revision'
import { at, count, day, id, key, maybeKey, maybeOneOf, maybeText, oneOf, table, text } from './columns'

export const PURPOSES = ['information', 'comment', 'approval', 'construction', 'as_built'] as const satisfies readonly IssuePurpose[]

export class Revision extends Model<InferAttributes<Revision>, InferCreationAttributes<Revision>> {
  declare id: string
  declare sheetId: string
  declare label: string
  declare ordinal: number
  declare state: RevisionState
  declare version: CreationOptional<number>
  declare authorId: string
  declare basedOnId: CreationOptional<string | null>
  declare reason: CreationOptional<string | null>
  declare checkerId: CreationOptional<string | null>
  declare dueDate: CreationOptional<string | null>
  declare purpose: CreationOptional<IssuePurpose | null>
  declare since: CreationOptional<Date>
  declare returnedReason: CreationOptional<string | null>
  declare returnedBy: CreationOptional<string | null>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

/** The row that every append and every freeze of the document locks. */
export class RevisionDoc extends Model<InferAttributes<RevisionDoc>, InferCreationAttributes<RevisionDoc>> {
  declare revisionId: string
  declare state: RevisionState
  /** Counts the freezes. */
  declare epoch: CreationOptional<number>
  /** The number that the next update gets; the first is 1. */
  declare nextSeq: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
}

export class RevisionUpdate extends Model<InferAttributes<RevisionUpdate>, InferCreationAttributes<RevisionUpdate>> {
  declare revisionId: string
  declare seq: number
  declare epoch: number
  declare userId: string
  declare bytes: Buffer
  declare createdAt: CreationOptional<Date>
}

/** Holds every update up to and including `seq`. */
export class RevisionSnapshot extends Model<InferAttributes<RevisionSnapshot>, InferCreationAttributes<RevisionSnapshot>> {
  declare revisionId: string
  declare seq: number
  declare bytes: Buffer
  declare createdAt: CreationOptional<Date>
}

export class YjsClient extends Model<InferAttributes<YjsClient>, InferCreationAttributes<YjsClient>> {
  declare revisionId: string
  declare clientId: number
  declare userId: string
  declare createdAt: CreationOptional<Date>
}

export class Contributor extends Model<InferAttributes<Contributor>, InferCreationAttributes<Contributor>> {
  declare revisionId: string
  declare userId: string
  declare inherited: CreationOptional<boolean>
  declare firstAt: CreationOptional<Date>
}

export class RestorePoint extends Model<InferAttributes<RestorePoint>, InferCreationAttributes<RestorePoint>> {
  declare id: string
  declare revisionId: string
  declare name: string
  declare seq: number
  declare bytes: Buffer
  declare createdBy: string
  declare createdAt: CreationOptional<Date>
}

const firstKey = () => ({ ...key(), primaryKey: true })
const sequence = () => ({ ...count(), primaryKey: true })
const bytes = () => ({ type: DataTypes.BLOB('long'), allowNull: false })

RevisionDoc.init({
  revisionId: firstKey(), state: oneOf(...REVISION_STATES), epoch: { ...count(), defaultValue: 1 }, nextSeq: { ...count(), defaultValue: 1 }, createdAt: at(),
}, table('revision_docs'))
RevisionUpdate.init({
  revisionId: firstKey(), seq: sequence(), epoch: count(), userId: key(), bytes: bytes(), createdAt: at(),
}, table('revision_updates'))
RevisionSnapshot.init({ revisionId: firstKey(), seq: sequence(), bytes: bytes(), createdAt: at() }, table('revision_snapshots'))
YjsClient.init({
  revisionId: firstKey(), clientId: { type: DataTypes.BIGINT.UNSIGNED, primaryKey: true }, userId: key(), createdAt: at(),
}, table('yjs_clients'))
RestorePoint.init({
  id: id(), revisionId: key(), name: text(200), seq: count(), bytes: bytes(), createdBy: key(), createdAt: at(),
}, table('restore_points'))

Revision.init({
  id: id(), sheetId: key(), label: text(8), ordinal: count(), state: oneOf(...REVISION_STATES), version: { ...count(), defaultValue: 1 },
  authorId: key(), basedOnId: maybeKey(), reason: maybeText(2000), checkerId: maybeKey(), dueDate: day(), purpose: maybeOneOf(...PURPOSES),
  since: at(), returnedReason: maybeText(4000), returnedBy: maybeKey(), createdAt: at(), updatedAt: at(),
}, table('revisions'))
Contributor.init({
  revisionId: firstKey(), userId: firstKey(), inherited: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false }, firstAt: at(),
}, table('contributors'))
