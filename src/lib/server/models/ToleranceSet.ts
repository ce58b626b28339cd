import {
	DataTypes,
	Model,
	type CreationOptional,
	type ForeignKey,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import { momentNow, text, uuid, uuidKey } from './base';

const cents = { type: DataTypes.REAL, allowNull: false };

/**
 * How far off a string may be left, in cents either way. Dated, never edited: an attempt is judged by
 * the set that was in force when it was made.
 */
export class ToleranceSet extends Model<
	InferAttributes<ToleranceSet>,
	InferCreationAttributes<ToleranceSet>
> {
	declare id: CreationOptional<string>;
	/** Null: the house set, in force where a class has none of its own. */
	declare classId: ForeignKey<string | null>;
	declare level: 'learning' | 'working' | 'concert';
	declare inForceFrom: CreationOptional<Date>;
	declare forkCents: number;
	declare temperamentCents: number;
	declare lowAndSixthOctaveCents: number;
	declare seventhOctaveCents: number;
	declare unisonCents: number;
	declare movedByBlowsCents: number;
	declare createdBy: ForeignKey<string | null>;
}

export function defineToleranceSet(sequelize: Sequelize): void {
	ToleranceSet.init(
		{
			id: uuidKey(),
			classId: uuid(true),
			level: text(),
			inForceFrom: momentNow(),
			forkCents: cents,
			temperamentCents: cents,
			lowAndSixthOctaveCents: cents,
			seventhOctaveCents: cents,
			unisonCents: cents,
			movedByBlowsCents: cents,
			createdBy: uuid(true)
		},
		{ sequelize, tableName: 'tolerance_set', underscored: true, timestamps: false }
	);
}
