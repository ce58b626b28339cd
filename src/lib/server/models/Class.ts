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
import { integer, moment, momentNow, text, uuid, uuidKey } from './base';
import { User } from './User';

/** A course's group of students with its instructors. */
export class Class extends Model<InferAttributes<Class>, InferCreationAttributes<Class>> {
	declare id: CreationOptional<string>;
	declare name: string;
	/** Calendar days, ISO `YYYY-MM-DD`. */
	declare startsOn: CreationOptional<string | null>;
	declare endsOn: CreationOptional<string | null>;
	/** Part of what the join link is derived from: raising it revokes the link. */
	declare joinLinkVersion: CreationOptional<number>;
	declare archivedAt: CreationOptional<Date | null>;
	declare createdAt: CreationOptional<Date>;
	declare updatedAt: CreationOptional<Date>;
	declare memberships?: NonAttribute<Membership[]>;
}

/** A person's place in a class. */
export class Membership extends Model<
	InferAttributes<Membership>,
	InferCreationAttributes<Membership>
> {
	declare id: CreationOptional<string>;
	declare classId: ForeignKey<string>;
	declare userId: ForeignKey<string>;
	declare role: 'instructor' | 'student';
	declare joinedAt: CreationOptional<Date>;
	declare leftAt: CreationOptional<Date | null>;
	declare class?: NonAttribute<Class>;
	declare user?: NonAttribute<User>;
}

export function defineClass(sequelize: Sequelize): void {
	Class.init(
		{
			id: uuidKey(),
			name: text(),
			startsOn: { type: DataTypes.DATEONLY, allowNull: true },
			endsOn: { type: DataTypes.DATEONLY, allowNull: true },
			joinLinkVersion: { ...integer(), defaultValue: 1 },
			archivedAt: moment(true),
			createdAt: moment(),
			updatedAt: moment()
		},
		{ sequelize, tableName: 'class', underscored: true }
	);
	Membership.init(
		{
			id: uuidKey(),
			classId: uuid(),
			userId: uuid(),
			role: text(),
			joinedAt: momentNow(),
			leftAt: moment(true)
		},
		{ sequelize, tableName: 'membership', underscored: true, timestamps: false }
	);
	Class.hasMany(Membership, { foreignKey: 'classId', as: 'memberships' });
	Membership.belongsTo(Class, { foreignKey: 'classId', as: 'class' });
	Membership.belongsTo(User, { foreignKey: 'userId', as: 'user' });
	User.hasMany(Membership, { foreignKey: 'userId', as: 'memberships' });
}
