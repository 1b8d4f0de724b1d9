import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute } from 'sequelize'
import type { Role } from '#shared/types/api'
import { at, hash, id, json, key, maybeAt, maybeKey, maybeText, oneOf, table, text } from './columns'

export class Organisation extends Model<InferAttributes<Organisation>, InferCreationAttributes<Organisation>> {
  declare id: string
  declare name: string
  declare kind: 'firm' | 'client'
  declare createdAt: CreationOptional<Date>
}
Organisation.init({
  id: id(),
  name: text(160),
  kind: oneOf('firm', 'client'),
  createdAt: at(),
}, table('organisations'))

/** `organisationId` is set for a client's people only; `passwordHash` is null until the invitation has been accepted. */
export class User extends Model<InferAttributes<User>, InferCreationAttributes<User>> {
  declare id: string
  declare email: string
  declare name: string
  declare initials: string
  declare passwordHash: CreationOptional<string | null>
  declare organisationId: CreationOptional<string | null>
  declare disabledAt: CreationOptional<Date | null>
  declare createdAt: CreationOptional<Date>
  declare roleRows?: NonAttribute<UserRole[]>
  declare organisation?: NonAttribute<Organisation | null>
}
User.init({
  id: id(),
  email: text(191),
  name: text(120),
  initials: text(6),
  passwordHash: maybeText(255),
  organisationId: maybeKey(),
  disabledAt: maybeAt(),
  createdAt: at(),
}, table('users'))

export class UserRole extends Model<InferAttributes<UserRole>, InferCreationAttributes<UserRole>> {
  declare userId: string
  declare role: Role
  /** The role at 0 decides which work list the person lands on. */
  declare position: number
  declare createdAt: CreationOptional<Date>
}
UserRole.init({
  userId: { ...key(), primaryKey: true },
  role: { type: DataTypes.STRING(20), primaryKey: true },
  position: { type: DataTypes.TINYINT.UNSIGNED, allowNull: false },
  createdAt: at(),
}, table('user_roles'))

/** A signed-in device. The sealed cookie holds nothing but the id of this row. */
export class Session extends Model<InferAttributes<Session>, InferCreationAttributes<Session>> {
  declare id: string
  declare userId: string
  declare createdAt: CreationOptional<Date>
  declare lastSeenAt: Date
  declare expiresAt: Date
  declare revokedAt: CreationOptional<Date | null>
  declare userAgent: string
  declare ip: string
  declare user?: NonAttribute<User>
}
Session.init({
  id: id(),
  userId: key(),
  createdAt: at(),
  lastSeenAt: at(),
  expiresAt: at(),
  revokedAt: maybeAt(),
  userAgent: text(255),
  ip: text(45),
}, table('sessions'))

export type LinkKind = 'invitation' | 'reset'

/** A link that works once. Only the hash of its secret is kept. */
export class OneTimeLink extends Model<InferAttributes<OneTimeLink>, InferCreationAttributes<OneTimeLink>> {
  declare id: string
  declare kind: LinkKind
  declare userId: string
  declare tokenHash: string
  declare createdAt: CreationOptional<Date>
  declare expiresAt: Date
  declare usedAt: CreationOptional<Date | null>
}
OneTimeLink.init({
  id: id(),
  kind: text(20),
  userId: key(),
  tokenHash: hash(),
  createdAt: at(),
  expiresAt: at(),
  usedAt: maybeAt(),
}, table('one_time_links'))

export class LoginAttempt extends Model<InferAttributes<LoginAttempt>, InferCreationAttributes<LoginAttempt>> {
  declare id: CreationOptional<number>
  /** SHA-256 of the address that was typed, so that a mistyped password in the address field is not kept. */
  declare account: string
  declare ip: string
  declare succeeded: boolean
  declare createdAt: CreationOptional<Date>
}
LoginAttempt.init({
  id: { type: DataTypes.BIGINT.UNSIGNED, primaryKey: true, autoIncrement: true },
  account: hash(),
  ip: text(45),
  succeeded: { type: DataTypes.BOOLEAN, allowNull: false },
  createdAt: at(),
}, table('login_attempts'))

export class Setting extends Model<InferAttributes<Setting>, InferCreationAttributes<Setting>> {
  declare key: string
  declare value: unknown
  declare createdAt: CreationOptional<Date>
  declare updatedAt: Date
}
Setting.init({
  key: { type: DataTypes.STRING(60), primaryKey: true },
  value: json(),
  createdAt: at(),
  updatedAt: at(),
}, table('settings'))

User.hasMany(UserRole, { foreignKey: 'userId', as: 'roleRows' })
User.belongsTo(Organisation, { foreignKey: 'organisationId', as: 'organisation' })
Session.belongsTo(User, { foreignKey: 'userId', as: 'user' })
