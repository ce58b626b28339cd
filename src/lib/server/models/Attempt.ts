import {
	DataTypes,
	Model,
	type CreationOptional,
	type ForeignKey,
	type InferAttributes,
	type InferCreationAttributes,
	type Sequelize
} from 'sequelize';
import type {
	BlockResult,
	BlockSpec,
	DeviceFacts,
	RawTrial,
	ScoredDrillId
} from '../../drills/types';
import { integer, json, moment, momentNow, text, uuid } from './base';

const real = { type: DataTypes.DOUBLE, allowNull: false };

/**
 * One block of a drill as a student played it. Rows are only ever added; the database refuses changes.
 */
export class Attempt extends Model<InferAttributes<Attempt>, InferCreationAttributes<Attempt>> {
	/** Made by the client, so that sending twice stores once. */
	declare id: string;
	declare studentId: ForeignKey<string>;
	declare drill: ScoredDrillId;
	declare engineVersion: number;
	/** 0 to 2^32 - 1; PostgreSQL's bigint arrives as text. */
	declare seed: number | string;
	/** SHA-256 of what was sent, to tell a repeat from another attempt under the same id. */
	declare contentHash: string;
	declare stimulus: BlockSpec;
	declare device: DeviceFacts;
	declare trials: RawTrial[];
	declare clientScore: number;
	declare serverScore: number;
	/** The client's score differs from the server's by more than 1e-6. */
	declare scoreFlagged: CreationOptional<boolean>;
	declare result: BlockResult;
	/** Median |error| of the trials in cents, with its 95 % interval. */
	declare errorMedian: number;
	declare errorLow: number;
	declare errorHigh: number;
	/** What its trials were judged by: the median of their tolerances, cents. */
	declare toleranceCents: number;
	declare inside: number;
	declare trialCount: number;
	declare seconds: number;
	/** The day in UTC on which it counts, `YYYY-MM-DD`. */
	declare day: string;
	declare startedAt: Date;
	declare finishedAt: Date;
	declare receivedAt: CreationOptional<Date>;
}

export function defineAttempt(sequelize: Sequelize): void {
	Attempt.init(
		{
			id: { type: DataTypes.UUID, primaryKey: true },
			studentId: uuid(),
			drill: text(),
			engineVersion: integer(),
			seed: { type: DataTypes.BIGINT, allowNull: false },
			contentHash: text(),
			stimulus: json(),
			device: json(),
			trials: json(),
			clientScore: real,
			serverScore: real,
			scoreFlagged: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
			result: json(),
			errorMedian: real,
			errorLow: real,
			errorHigh: real,
			toleranceCents: real,
			inside: integer(),
			trialCount: integer(),
			seconds: integer(),
			day: { type: DataTypes.DATEONLY, allowNull: false },
			startedAt: moment(),
			finishedAt: moment(),
			receivedAt: momentNow()
		},
		{ sequelize, tableName: 'attempt', underscored: true, timestamps: false }
	);
}
