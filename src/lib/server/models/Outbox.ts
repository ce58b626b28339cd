import {
	DataTypes,
	Model,
	type CreationOptional,
	type ForeignKey,
	type InferAttributes,
	type InferCreationAttributes,
	type NonAttribute,
	type Sequelize
} from 'sequelize';
import { integer, json, moment, momentNow, text, uuid, uuidKey } from './base';
import { User } from './User';

/** A mail on its way. The body is erased once the mail has left: it holds secret links. */
export class OutboxMail extends Model<
	InferAttributes<OutboxMail>,
	InferCreationAttributes<OutboxMail>
> {
	declare id: CreationOptional<string>;
	declare kind: 'invitation' | 'reset' | 'welcome' | 'notice';
	declare recipient: string;
	declare subject: string;
	declare textBody: string | null;
	declare htmlBody: string | null;
	declare attempts: CreationOptional<number>;
	declare nextAttemptAt: CreationOptional<Date>;
	declare sentAt: CreationOptional<Date | null>;
	declare gaveUpAt: CreationOptional<Date | null>;
	declare lastError: CreationOptional<string | null>;
	declare createdAt: CreationOptional<Date>;
}

/** Who did what to whom, and when. Rows are only ever added. */
export class AuditEntry extends Model<
	InferAttributes<AuditEntry>,
	InferCreationAttributes<AuditEntry>
> {
	declare id: CreationOptional<string>;
	/** Null when nobody was signed in (a refused sign-in, an accepted invitation). */
	declare actorId: ForeignKey<string | null>;
	/** Noun and verb, such as `user.deactivated`. */
	declare action: string;
	declare subjectType: string | null;
	declare subjectId: string | null;
	declare detail: CreationOptional<Record<string, unknown>>;
	declare createdAt: CreationOptional<Date>;
	declare actor?: NonAttribute<User | null>;
}

export function defineOutbox(sequelize: Sequelize): void {
	OutboxMail.init(
		{
			id: uuidKey(),
			kind: text(),
			recipient: { type: DataTypes.CITEXT, allowNull: false },
			subject: text(),
			textBody: text(true),
			htmlBody: text(true),
			attempts: { ...integer(), defaultValue: 0 },
			nextAttemptAt: momentNow(),
			sentAt: moment(true),
			gaveUpAt: moment(true),
			lastError: text(true),
			createdAt: momentNow()
		},
		{ sequelize, tableName: 'mail_outbox', underscored: true, timestamps: false }
	);
	AuditEntry.init(
		{
			id: uuidKey(),
			actorId: uuid(true),
			action: text(),
			subjectType: text(true),
			subjectId: text(true),
			detail: { ...json(), defaultValue: {} },
			createdAt: momentNow()
		},
		{ sequelize, tableName: 'audit_entry', underscored: true, timestamps: false }
	);
	AuditEntry.belongsTo(User, { foreignKey: 'actorId', as: 'actor' });
}
