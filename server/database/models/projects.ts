import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize'
import type { CheckLevel, SheetSettings } from '../../../shared/types/api'
import type { RevisionScheme } from '../../../shared/workflow/labels'
import { at, count, hash, id, json, key, maybeAt, maybeKey, oneOf, table, text } from './columns'

export class Project extends Model<InferAttributes<Project>, InferCreationAttributes<Project>> {
  declare id: string
  declare jobNumber: string
  declare title: string
  declare clientId: string | null
  declare revisionScheme: RevisionScheme
  declare checkLevel: CheckLevel
  declare relianceNotice: string
  declare archivedAt: CreationOptional<Date | null>
  declare createdBy: string
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export type ProjectRole = 'member' | 'manager'

export class ProjectMember extends Model<InferAttributes<ProjectMember>, InferCreationAttributes<ProjectMember>> {
  declare projectId: string
  declare userId: string
  declare role: ProjectRole
  declare createdAt: CreationOptional<Date>
}

export type ReferenceKind = 'standard' | 'client_document' | 'other'

export class ProjectReference extends Model<InferAttributes<ProjectReference>, InferCreationAttributes<ProjectReference>> {
  declare id: string
  declare projectId: string
  declare kind: ReferenceKind
  declare designation: string
  declare title: string
  declare edition: string
  declare createdBy: string
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export class Sheet extends Model<InferAttributes<Sheet>, InferCreationAttributes<Sheet>> {
  declare id: string
  declare projectId: string
  declare number: string
  declare title: string
  declare checkLevel: CheckLevel
  declare settings: SheetSettings
  declare createdBy: string
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export class Attachment extends Model<InferAttributes<Attachment>, InferCreationAttributes<Attachment>> {
  declare id: string
  declare projectId: string
  declare name: string
  declare mime: string
  declare size: number
  declare sha256: string
  declare storageKey: string
  declare uploadedBy: string
  declare createdAt: CreationOptional<Date>
}

Project.init({
  id: id(), jobNumber: text(40), title: text(200), clientId: maybeKey(), revisionScheme: oneOf('letters', 'numbers'),
  checkLevel: { type: DataTypes.TINYINT.UNSIGNED, allowNull: false }, relianceNotice: { type: DataTypes.TEXT, allowNull: false },
  archivedAt: maybeAt(), createdBy: key(), createdAt: at(), updatedAt: at(),
}, table('projects'))
ProjectMember.init({
  projectId: { ...key(), primaryKey: true }, userId: { ...key(), primaryKey: true },
  role: { ...oneOf('member', 'manager'), primaryKey: true }, createdAt: at(),
}, table('project_members'))
ProjectReference.init({
  id: id(), projectId: key(), kind: oneOf('standard', 'client_document', 'other'), designation: text(120), title: text(300), edition: text(80),
  createdBy: key(), createdAt: at(), updatedAt: at(),
}, table('project_references'))
Sheet.init({
  id: id(), projectId: key(), number: text(40), title: text(200), checkLevel: { type: DataTypes.TINYINT.UNSIGNED, allowNull: false },
  settings: json(), createdBy: key(), createdAt: at(), updatedAt: at(),
}, table('sheets'))
Attachment.init({
  id: id(), projectId: key(), name: text(200), mime: text(60), size: count(), sha256: hash(), storageKey: text(200), uploadedBy: key(), createdAt: at(),
}, table('attachments'))
