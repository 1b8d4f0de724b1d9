import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize'
import type { InputStatus } from '../../../shared/document/types'
import type { SheetSettings } from '../../../shared/types/api'
import { at, count, hash, id, json, key, lineId, longText, oneOf, table, text } from './columns'

/** What the title block said when the revision was frozen. */
export interface FrozenTitleBlock { number: string, title: string, settings: SheetSettings }

/** The frozen content of a revision; never changed once written. */
export class Submission extends Model<InferAttributes<Submission>, InferCreationAttributes<Submission>> {
  declare id: string
  declare revisionId: string
  declare ordinal: number
  declare format: number
  /** Canonical text (RFC 8785); `contentHash` is its SHA-256. */
  declare contentJson: string
  declare contentHash: string
  /** Canonical text of the recorded results; `resultsHash` is its SHA-256. */
  declare recordedJson: string
  declare resultsHash: string
  /** The engine's results as they are shown. */
  declare shownJson: string
  declare cautionsJson: string
  declare titleBlock: FrozenTitleBlock
  declare engineVersion: string
  declare engineHash: string
  declare submittedBy: string
  declare seq: number
  declare stateVector: Buffer
  declare createdAt: CreationOptional<Date>
}

export class SubmissionLine extends Model<InferAttributes<SubmissionLine>, InferCreationAttributes<SubmissionLine>> {
  declare submissionId: string
  declare lineId: string
  declare hash: string
  declare ord: number
  declare kind: 'line' | 'block'
}

/** An input and how it came to be known. */
export class SubmissionHold extends Model<InferAttributes<SubmissionHold>, InferCreationAttributes<SubmissionHold>> {
  declare submissionId: string
  declare lineId: string
  declare kind: InputStatus
  declare subject: string
  declare reference: string
}

export class SheetValue extends Model<InferAttributes<SheetValue>, InferCreationAttributes<SheetValue>> {
  declare submissionId: string
  declare lineId: string
  declare name: string
  declare shown: string
}

export class Acceptance extends Model<InferAttributes<Acceptance>, InferCreationAttributes<Acceptance>> {
  declare id: string
  declare submissionId: string
  declare lineId: string | null
  declare what: string
  declare reason: string
  declare byId: string
  declare createdAt: CreationOptional<Date>
}

export class Engine extends Model<InferAttributes<Engine>, InferCreationAttributes<Engine>> {
  declare hash: string
  declare version: string
  declare createdAt: CreationOptional<Date>
}

const firstKey = () => ({ ...key(), primaryKey: true })
const firstLine = () => ({ ...lineId(), primaryKey: true })

SubmissionLine.init({
  submissionId: firstKey(), lineId: firstLine(), hash: hash(), ord: count(), kind: oneOf('line', 'block'),
}, table('submission_lines'))
SubmissionHold.init({
  submissionId: firstKey(), lineId: firstLine(), kind: oneOf('given', 'assumed', 'hold'), subject: text(2000), reference: text(2000),
}, table('submission_holds'))
SheetValue.init({ submissionId: firstKey(), lineId: firstLine(), name: text(120), shown: text(200) }, table('sheet_values'))

Engine.init({ hash: { ...hash(), primaryKey: true }, version: text(40), createdAt: at() }, table('engines'))
Submission.init({
  id: id(), revisionId: key(), ordinal: count(), format: count(), contentJson: longText(), contentHash: hash(), recordedJson: longText(),
  resultsHash: hash(), shownJson: longText(), cautionsJson: longText(), titleBlock: json(), engineVersion: text(40), engineHash: hash(),
  submittedBy: key(), seq: count(), stateVector: { type: DataTypes.BLOB('medium'), allowNull: false }, createdAt: at(),
}, table('submissions'))
Acceptance.init({
  id: id(), submissionId: key(), lineId: { ...lineId(), allowNull: true }, what: text(2000), reason: text(2000), byId: key(), createdAt: at(),
}, table('acceptances'))
