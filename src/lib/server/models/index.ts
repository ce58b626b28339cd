import type { Sequelize } from 'sequelize';
import { defineClass } from './Class';
import { defineInvitation } from './Invitation';
import { defineOutbox } from './Outbox';
import { defineToleranceSet } from './ToleranceSet';
import { defineUser } from './User';

export { Class, Membership } from './Class';
export { Invitation, PasswordReset } from './Invitation';
export { AuditEntry, OutboxMail } from './Outbox';
export { ToleranceSet } from './ToleranceSet';
export { User } from './User';

/** Order matters where one model refers to another. */
const DEFINITIONS = [defineUser, defineClass, defineInvitation, defineOutbox, defineToleranceSet];

/** Defines every model on this connection. */
export function defineModels(sequelize: Sequelize): void {
	for (const define of DEFINITIONS) define(sequelize);
}
