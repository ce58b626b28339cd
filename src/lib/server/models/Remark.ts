import {
	Model,
	type CreationOptional,
	type ForeignKey,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import { moment, momentNow, text, uuid, uuidKey } from './base';

/** Words from an instructor to a student, about an attempt or in general. */
export class Remark extends Model<InferAttributes<Remark>, InferCreationAttributes<Remark>> {
	declare id: CreationOptional<string>;
	declare studentId: ForeignKey<string>;
	declare authorId: ForeignKey<string>;
	/** An attempt of the same student. */
	declare attemptId: ForeignKey<string | null>;
	declare text: string;
	declare createdAt: CreationOptional<Date>;
	declare seenAt: CreationOptional<Date | null>;
}

export function defineRemark(sequelize: Sequelize): void {
	Remark.init(
		{
			id: uuidKey(),
			studentId: uuid(),
			authorId: uuid(),
			attemptId: uuid(true),
			text: text(),
			createdAt: momentNow(),
			seenAt: moment(true)
		},
		{ sequelize, tableName: 'remark', underscored: true, timestamps: false }
	);
}
