import {
	DataTypes,
	Model,
	type CreationOptional,
	type ForeignKey,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import { json, moment, momentNow, text, uuid } from './base';

/** The numbers of one check of a real string. There is no place for sound in it. */
export class StringCheck extends Model<
	InferAttributes<StringCheck>,
	InferCreationAttributes<StringCheck>
> {
	/** Made by the client. */
	declare id: string;
	declare studentId: ForeignKey<string>;
	declare contentHash: string;
	declare kind: 'note' | 'unison' | 'interval';
	/** Names with sharps, as asked for; empty where the note was left to be found. */
	declare notes: string[];
	declare source: 'microphone' | 'file';
	declare result: Record<string, unknown>;
	declare device: Record<string, unknown>;
	declare checkedAt: Date;
	declare receivedAt: CreationOptional<Date>;
}

export function defineStringCheck(sequelize: Sequelize): void {
	StringCheck.init(
		{
			id: { type: DataTypes.UUID, primaryKey: true },
			studentId: uuid(),
			contentHash: text(),
			kind: text(),
			notes: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false },
			source: text(),
			result: json(),
			device: json(),
			checkedAt: moment(),
			receivedAt: momentNow()
		},
		{ sequelize, tableName: 'string_check', underscored: true, timestamps: false }
	);
}
