import {
	DataTypes,
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { Role } from '../auth/actor';
import { integer, moment, text, uuidKey } from './base';

/** A person with an account. */
export class User extends Model<InferAttributes<User>, InferCreationAttributes<User>> {
	declare id: CreationOptional<string>;
	/** Case does not matter (citext). */
	declare email: string;
	declare name: string;
	declare role: Role;
	/** bcrypt; null until the person has chosen a password. */
	declare passwordHash: CreationOptional<string | null>;
	/** A session made under another version is worth nothing. */
	declare sessionVersion: CreationOptional<number>;
	declare deactivatedAt: CreationOptional<Date | null>;
	declare createdAt: CreationOptional<Date>;
	declare updatedAt: CreationOptional<Date>;
}

export function defineUser(sequelize: Sequelize): void {
	User.init(
		{
			id: uuidKey(),
			email: { type: DataTypes.CITEXT, allowNull: false, unique: true },
			name: text(),
			role: text(),
			passwordHash: text(true),
			sessionVersion: { ...integer(), defaultValue: 1 },
			deactivatedAt: moment(true),
			createdAt: moment(),
			updatedAt: moment()
		},
		{ sequelize, tableName: 'user', underscored: true }
	);
}
