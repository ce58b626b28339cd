import {
	DataTypes,
	Model,
	type CreationOptional,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type { ScoredDrillId } from '../../drills/types';

/** One student's practice at one drill on one day; kept in the transaction that adds an attempt. */
export class AttemptDaily extends Model<
	InferAttributes<AttemptDaily>,
	InferCreationAttributes<AttemptDaily>
> {
	declare studentId: string;
	declare drill: ScoredDrillId;
	/** `YYYY-MM-DD`, UTC. */
	declare day: string;
	declare attempts: CreationOptional<number>;
	declare seconds: CreationOptional<number>;
	/** Median of the day's attempts' median |error|, in cents. */
	declare medianError: CreationOptional<number | null>;
}

export function defineAttemptDaily(sequelize: Sequelize): void {
	const count = { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 };
	AttemptDaily.init(
		{
			studentId: { type: DataTypes.UUID, primaryKey: true },
			drill: { type: DataTypes.TEXT, primaryKey: true },
			day: { type: DataTypes.DATEONLY, primaryKey: true },
			attempts: count,
			seconds: count,
			medianError: { type: DataTypes.DOUBLE, allowNull: true }
		},
		{ sequelize, tableName: 'attempt_daily', underscored: true, timestamps: false }
	);
}
