import { DataTypes, type ModelAttributeColumnOptions } from 'sequelize';

/** Column definitions for models. Functions, because Sequelize writes the column's name into the object it is given. */
type Column = ModelAttributeColumnOptions;

export const key = (): Column => ({ type: DataTypes.TEXT, primaryKey: true });
export const text = (defaultValue?: string): Column => ({
  type: DataTypes.TEXT,
  allowNull: false,
  defaultValue,
});
export const optionalText = (): Column => ({ type: DataTypes.TEXT });
export const integer = (defaultValue?: number): Column => ({
  type: DataTypes.INTEGER,
  allowNull: false,
  defaultValue,
});
export const optionalInteger = (): Column => ({ type: DataTypes.INTEGER });
export const flag = (defaultValue = false): Column => ({
  type: DataTypes.BOOLEAN,
  allowNull: false,
  defaultValue,
});
/** An instant, kept in UTC. */
export const at = (): Column => ({ type: DataTypes.DATE, allowNull: false });
export const optionalAt = (): Column => ({ type: DataTypes.DATE });
export const json = (): Column => ({ type: DataTypes.JSON, allowNull: false });
export const optionalJson = (): Column => ({ type: DataTypes.JSON });
/** For models with `version: true`. */
export const version = (): Column => integer(0);
