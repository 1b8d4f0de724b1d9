import { DataTypes, type ModelAttributeColumnOptions } from 'sequelize'
import { now } from '../../utils/clock'
import { sequelize } from '../connection'

/** Column shapes that the models share. Each call makes a new object, since Sequelize writes into it. */
export const id = () => ({ type: DataTypes.CHAR(26), primaryKey: true } satisfies ModelAttributeColumnOptions)
export const key = () => ({ type: DataTypes.CHAR(26), allowNull: false } satisfies ModelAttributeColumnOptions)
export const maybeKey = () => ({ type: DataTypes.CHAR(26), allowNull: true } satisfies ModelAttributeColumnOptions)
export const hash = () => ({ type: DataTypes.CHAR(64), allowNull: false } satisfies ModelAttributeColumnOptions)
export const lineId = () => ({ type: DataTypes.STRING(80), allowNull: false } satisfies ModelAttributeColumnOptions)
export const text = (length: number) => ({ type: DataTypes.STRING(length), allowNull: false } satisfies ModelAttributeColumnOptions)
export const maybeText = (length: number) => ({ type: DataTypes.STRING(length), allowNull: true } satisfies ModelAttributeColumnOptions)
export const longText = () => ({ type: DataTypes.TEXT('long'), allowNull: false } satisfies ModelAttributeColumnOptions)
export const count = () => ({ type: DataTypes.INTEGER.UNSIGNED, allowNull: false } satisfies ModelAttributeColumnOptions)
export const maybeCount = () => ({ type: DataTypes.INTEGER.UNSIGNED, allowNull: true } satisfies ModelAttributeColumnOptions)
export const day = () => ({ type: DataTypes.DATEONLY, allowNull: true } satisfies ModelAttributeColumnOptions)
export const at = () => ({ type: DataTypes.DATE(3), allowNull: false, defaultValue: now } satisfies ModelAttributeColumnOptions)
export const maybeAt = () => ({ type: DataTypes.DATE(3), allowNull: true } satisfies ModelAttributeColumnOptions)
export const json = () => ({ type: DataTypes.JSON, allowNull: false } satisfies ModelAttributeColumnOptions)
export const oneOf = (...values: readonly string[]) => ({ type: DataTypes.ENUM(...values), allowNull: false } satisfies ModelAttributeColumnOptions)
export const maybeOneOf = (...values: readonly string[]) => ({ type: DataTypes.ENUM(...values), allowNull: true } satisfies ModelAttributeColumnOptions)

/** A model's options. Names are camel case here and underscored in the database; times are written by ourselves. */
export const table = (tableName: string) => ({ sequelize, tableName, modelName: tableName })
