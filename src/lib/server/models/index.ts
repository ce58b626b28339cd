import type { Sequelize } from 'sequelize';
import { defineAttempt } from './Attempt';
import { defineAttemptDaily } from './AttemptDaily';
import { defineClass } from './Class';
import { defineInvitation } from './Invitation';
import { defineOutbox } from './Outbox';
import { defineRemark } from './Remark';
import { defineStringCheck } from './StringCheck';
import { defineToleranceSet } from './ToleranceSet';
import { defineUser } from './User';

export { Attempt } from './Attempt';
export { AttemptDaily } from './AttemptDaily';
export { Class, Membership } from './Class';
export { Invitation, PasswordReset } from './Invitation';
export { AuditEntry, OutboxMail } from './Outbox';
export { Remark } from './Remark';
export { StringCheck } from './StringCheck';
export { ToleranceSet } from './ToleranceSet';
export { User } from './User';

/** Order matters where one model refers to another. */
const DEFINITIONS = [
	defineUser,
	defineClass,
	defineInvitation,
	defineOutbox,
	defineToleranceSet,
	defineAttempt,
	defineAttemptDaily,
	defineStringCheck,
	defineRemark
];

/** Defines every model on this connection. */
export function defineModels(sequelize: Sequelize): void {
	for (const define of DEFINITIONS) define(sequelize);
}
