import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize'
import type { IssuePurpose, SignatureMeaning } from '../../../shared/types/api'
import { at, hash, id, key, maybeAt, maybeCount, maybeKey, maybeText, oneOf, table, text } from './columns'
import { PURPOSES } from './revisions'

export class SigningKey extends Model<InferAttributes<SigningKey>, InferCreationAttributes<SigningKey>> {
  declare id: string
  declare publicKey: string
  declare validFrom: Date
  declare validTo: CreationOptional<Date | null>
}

export class Signature extends Model<InferAttributes<Signature>, InferCreationAttributes<Signature>> {
  declare id: string
  declare revisionId: string
  declare submissionId: string
  declare meaning: SignatureMeaning
  declare userId: string
  declare signerName: string
  declare statement: string
  declare method: string | null
  declare extent: string | null
  declare hash: string
  declare payloadJson: string
  declare signature: string
  declare keyId: string
  declare previousId: string | null
  declare signedAt: Date
  declare voidedAt: CreationOptional<Date | null>
  declare voidReason: CreationOptional<string | null>
  declare createdAt: CreationOptional<Date>
}

export class Issue extends Model<InferAttributes<Issue>, InferCreationAttributes<Issue>> {
  declare id: string
  declare revisionId: string
  declare submissionId: string
  declare purpose: IssuePurpose
  /** What anyone who holds the document can verify it by. */
  declare code: string
  declare contentHash: string
  declare pdfStorageKey: CreationOptional<string | null>
  declare pdfHash: CreationOptional<string | null>
  declare pdfSize: CreationOptional<number | null>
  declare requestedBy: string
  declare createdAt: CreationOptional<Date>
  declare issuedAt: CreationOptional<Date | null>
  declare failedAt: CreationOptional<Date | null>
  declare failure: CreationOptional<string | null>
}

/** To whom an issue was sent. */
export class Transmittal extends Model<InferAttributes<Transmittal>, InferCreationAttributes<Transmittal>> {
  declare id: string
  declare issueId: string
  declare userId: string
  declare email: string
  declare createdAt: CreationOptional<Date>
}

SigningKey.init({
  id: { type: DataTypes.CHAR(16), primaryKey: true }, publicKey: { type: DataTypes.TEXT, allowNull: false }, validFrom: at(), validTo: maybeAt(),
}, table('signing_keys'))
Signature.init({
  id: id(), revisionId: key(), submissionId: key(), meaning: oneOf('prepared', 'checked', 'approved'), userId: key(), signerName: text(200),
  statement: text(4000), method: maybeText(40), extent: maybeText(2000), hash: hash(), payloadJson: { type: DataTypes.TEXT, allowNull: false },
  signature: text(200), keyId: { type: DataTypes.CHAR(16), allowNull: false }, previousId: maybeKey(), signedAt: at(), voidedAt: maybeAt(),
  voidReason: maybeText(4000), createdAt: at(),
}, table('signatures'))
Issue.init({
  id: id(), revisionId: key(), submissionId: key(), purpose: oneOf(...PURPOSES), code: text(40), contentHash: hash(), pdfStorageKey: maybeText(200),
  pdfHash: { ...hash(), allowNull: true }, pdfSize: maybeCount(), requestedBy: key(), createdAt: at(), issuedAt: maybeAt(), failedAt: maybeAt(),
  failure: maybeText(2000),
}, table('issues'))
Transmittal.init({ id: id(), issueId: key(), userId: key(), email: text(320), createdAt: at() }, table('transmittals'))
