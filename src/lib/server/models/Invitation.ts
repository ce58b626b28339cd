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
import { moment, momentNow, text, uuid, uuidKey } from './base';
import { Class } from './Class';
import { User } from './User';

/** A place in a class offered to an e-mail address; the link in the mail carries the token. */
export class Invitation extends Model<
	InferAttributes<Invitation>,
	InferCreationAttributes<Invitation>
> {
	declare id: CreationOptional<string>;
	declare classId: ForeignKey<string>;
	declare email: string;
	/** SHA-256 of the token, hexadecimal; the token itself is only in the mail. */
	declare tokenHash: string;
	/** Null when the person asked for it through the join link. */
	declare invitedBy: ForeignKey<string | null>;
	declare expiresAt: Date;
	declare acceptedAt: CreationOptional<Date | null>;
	declare acceptedBy: CreationOptional<ForeignKey<string | null>>;
	declare revokedAt: CreationOptional<Date | null>;
	declare createdAt: CreationOptional<Date>;
	declare class?: NonAttribute<Class>;
	declare inviter?: NonAttribute<User | null>;
}

/** A single-use link by which a person sets a password: forgotten, or the very first one. */
export class PasswordReset extends Model<
	InferAttributes<PasswordReset>,
	InferCreationAttributes<PasswordReset>
> {
	declare id: CreationOptional<string>;
	declare userId: ForeignKey<string>;
	declare tokenHash: string;
	declare purpose: 'reset' | 'welcome';
	declare expiresAt: Date;
	declare usedAt: CreationOptional<Date | null>;
	declare createdAt: CreationOptional<Date>;
	declare user?: NonAttribute<User>;
}

export function defineInvitation(sequelize: Sequelize): void {
	Invitation.init(
		{
			id: uuidKey(),
			classId: uuid(),
			email: { type: DataTypes.CITEXT, allowNull: false },
			tokenHash: text(),
			invitedBy: uuid(true),
			expiresAt: moment(),
			acceptedAt: moment(true),
			acceptedBy: uuid(true),
			revokedAt: moment(true),
			createdAt: momentNow()
		},
		{ sequelize, tableName: 'invitation', underscored: true, timestamps: false }
	);
	Invitation.belongsTo(Class, { foreignKey: 'classId', as: 'class' });
	Invitation.belongsTo(User, { foreignKey: 'invitedBy', as: 'inviter' });

	PasswordReset.init(
		{
			id: uuidKey(),
			userId: uuid(),
			tokenHash: text(),
			purpose: text(),
			expiresAt: moment(),
			usedAt: moment(true),
			createdAt: momentNow()
		},
		{ sequelize, tableName: 'password_reset', underscored: true, timestamps: false }
	);
	PasswordReset.belongsTo(User, { foreignKey: 'userId', as: 'user' });
}
