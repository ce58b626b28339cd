import { DataTypes, type ModelAttributeColumnOptions } from 'sequelize';

/**
 * Column definitions that recur; a new object each time, because Sequelize writes the column's name
 * into it. The database holds the real constraints (see migrations).
 */
export const uuidKey = (): ModelAttributeColumnOptions => ({
	type: DataTypes.UUID,
	primaryKey: true,
	defaultValue: DataTypes.UUIDV4
});

export const uuid = (allowNull = false): ModelAttributeColumnOptions => ({
	type: DataTypes.UUID,
	allowNull
});

export const text = (allowNull = false): ModelAttributeColumnOptions => ({
	type: DataTypes.TEXT,
	allowNull
});

export const moment = (allowNull = false): ModelAttributeColumnOptions => ({
	type: DataTypes.DATE,
	allowNull
});

/** A moment that the model fills with now when it is created. */
export const momentNow = (): ModelAttributeColumnOptions => ({
	type: DataTypes.DATE,
	allowNull: false,
	defaultValue: DataTypes.NOW
});

export const integer = (allowNull = false): ModelAttributeColumnOptions => ({
	type: DataTypes.INTEGER,
	allowNull
});

export const json = (allowNull = false): ModelAttributeColumnOptions => ({
	type: DataTypes.JSONB,
	allowNull
});
