import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize'
import { at, count, hash, id, json, key, maybeAt, maybeKey, maybeText, oneOf, table, text } from './columns'

export type JobState = 'waiting' | 'running' | 'done' | 'given_up'

export class Job extends Model<InferAttributes<Job>, InferCreationAttributes<Job>> {
  declare id: string
  declare kind: string
  declare uniqueKey: string
  declare payload: unknown
  declare state: CreationOptional<JobState>
  declare attempts: CreationOptional<number>
  declare runAfter: CreationOptional<Date>
  declare leasedUntil: CreationOptional<Date | null>
  declare leaseToken: CreationOptional<string | null>
  declare lastError: CreationOptional<string | null>
  declare createdAt: CreationOptional<Date>
  declare endedAt: CreationOptional<Date | null>
}

export class SentMessage extends Model<InferAttributes<SentMessage>, InferCreationAttributes<SentMessage>> {
  declare messageId: string
  declare jobId: string
  declare sentAt: CreationOptional<Date>
}

export class Notification extends Model<InferAttributes<Notification>, InferCreationAttributes<Notification>> {
  declare id: string
  declare userId: string
  declare revisionId: string | null
  declare kind: string
  declare text: string
  declare createdAt: CreationOptional<Date>
  declare readAt: CreationOptional<Date | null>
}

export class AuditEntry extends Model<InferAttributes<AuditEntry>, InferCreationAttributes<AuditEntry>> {
  declare seq: number
  declare at: Date
  declare actorId: string | null
  declare event: string
  declare subject: unknown
  declare data: unknown
  declare previousHash: string
  declare hash: string
}

Job.init({
  id: id(), kind: text(40), uniqueKey: text(191), payload: json(), state: { ...oneOf('waiting', 'running', 'done', 'given_up'), defaultValue: 'waiting' },
  attempts: { ...count(), defaultValue: 0 }, runAfter: at(), leasedUntil: maybeAt(), leaseToken: maybeKey(), lastError: maybeText(2000),
  createdAt: at(), endedAt: maybeAt(),
}, table('jobs'))
SentMessage.init({ messageId: { ...text(191), primaryKey: true }, jobId: key(), sentAt: at() }, table('sent_messages'))
Notification.init({
  id: id(), userId: key(), revisionId: maybeKey(), kind: text(40), text: text(1000), createdAt: at(), readAt: maybeAt(),
}, table('notifications'))
AuditEntry.init({
  seq: { type: DataTypes.BIGINT.UNSIGNED, primaryKey: true }, at: at(), actorId: maybeKey(), event: text(60), subject: json(), data: json(),
  previousHash: hash(), hash: hash(),
}, table('audit_entries'))
