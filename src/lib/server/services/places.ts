import type { Transaction } from 'sequelize';
import { Class, Membership, type User } from '../models';
import { Refusal } from '../refusal';

/**
 * Gives a person a student's place in a class; does nothing when they have one. Whoever left comes
 * back to the same membership.
 * @throws Refusal when the class is put away, or the person teaches it or is an admin.
 */
export async function takePlace(
	classId: string,
	user: User,
	transaction: Transaction
): Promise<void> {
	const found = await Class.findByPk(classId, { lock: true, transaction });
	if (!found || found.archivedAt) throw new Refusal('expired', 'This class has been put away.');
	if (user.deactivatedAt) throw new Refusal('forbidden', 'This account is closed.');
	if (user.role === 'admin') {
		throw new Refusal(
			'forbidden',
			'An admin’s account cannot take a place in a class. Use another address for that.'
		);
	}
	const [membership, made] = await Membership.findOrCreate({
		where: { classId, userId: user.id },
		defaults: { classId, userId: user.id, role: 'student' },
		transaction
	});
	if (made) return;
	if (membership.role === 'instructor') throw new Refusal('conflict', 'You teach this class.');
	if (membership.leftAt) {
		await membership.update({ leftAt: null, joinedAt: new Date() }, { transaction });
	}
}
