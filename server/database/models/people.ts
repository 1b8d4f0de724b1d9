import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute } from 'sequelize'
import type { Role } from '#shared/types/api'
import { sequelize } from '../connection'

const id = { type: DataTypes.CHAR(26), primaryKey: true }
const reference = { type: DataTypes.CHAR(26), allowNull: false }
const instant = { type: DataTypes.DATE(3), allowNull: false }
const perhaps = { type: DataTypes.DATE(3), allowNull: true }
const createdAt = { ...instant, defaultValue: DataTypes.NOW }

export class Organisation extends Model<InferAttributes<Organisation>, InferCreationAttributes<Organisation>> {
  declare id: string
  declare name: string
  declare kind: 'firm' | 'client'
  declare createdAt: CreationOptional<Date>
}
Organisation.init({
  id,
  name: { type: DataTypes.STRING(160), allowNull: false },
  kind: { type: DataTypes.ENUM('firm', 'client'), allowNull: false },
  createdAt,
}, { sequelize, tableName: 'organisations' })

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
  id,
  email: { type: DataTypes.STRING(191), allowNull: false },
  name: { type: DataTypes.STRING(120), allowNull: false },
  initials: { type: DataTypes.STRING(6), allowNull: false },
  passwordHash: { type: DataTypes.STRING(255), allowNull: true },
  organisationId: { type: DataTypes.CHAR(26), allowNull: true },
  disabledAt: perhaps,
  createdAt,
}, { sequelize, tableName: 'users' })

export class UserRole extends Model<InferAttributes<UserRole>, InferCreationAttributes<UserRole>> {
  declare userId: string
  declare role: Role
  /** The role at 0 decides which work list the person lands on. */
  declare position: number
  declare createdAt: CreationOptional<Date>
}
UserRole.init({
  userId: { ...reference, primaryKey: true },
  role: { type: DataTypes.STRING(20), primaryKey: true },
  position: { type: DataTypes.TINYINT.UNSIGNED, allowNull: false },
  createdAt,
}, { sequelize, tableName: 'user_roles' })

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
  id,
  userId: reference,
  createdAt,
  lastSeenAt: instant,
  expiresAt: instant,
  revokedAt: perhaps,
  userAgent: { type: DataTypes.STRING(255), allowNull: false },
  ip: { type: DataTypes.STRING(45), allowNull: false },
}, { sequelize, tableName: 'sessions' })

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
  id,
  kind: { type: DataTypes.STRING(20), allowNull: false },
  userId: reference,
  tokenHash: { type: DataTypes.CHAR(64), allowNull: false },
  createdAt,
  expiresAt: instant,
  usedAt: perhaps,
}, { sequelize, tableName: 'one_time_links' })

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
  account: { type: DataTypes.CHAR(64), allowNull: false },
  ip: { type: DataTypes.STRING(45), allowNull: false },
  succeeded: { type: DataTypes.BOOLEAN, allowNull: false },
  createdAt,
}, { sequelize, tableName: 'login_attempts' })

export class Setting extends Model<InferAttributes<Setting>, InferCreationAttributes<Setting>> {
  declare key: string
  declare value: unknown
  declare createdAt: CreationOptional<Date>
  declare updatedAt: Date
}
Setting.init({
  key: { type: DataTypes.STRING(60), primaryKey: true },
  value: { type: DataTypes.JSON, allowNull: false },
  createdAt,
  updatedAt: instant,
}, { sequelize, tableName: 'settings' })

User.hasMany(UserRole, { foreignKey: 'userId', as: 'roleRows' })
User.belongsTo(Organisation, { foreignKey: 'organisationId', as: 'organisation' })
Session.belongsTo(User, { foreignKey: 'userId', as: 'user' })
