import { OutboxMail } from '../../src/lib/server/models';

/** The newest unsent letter to an address, with the token of its link; null when there is none. */
export async function letterTo(recipient: string) {
	const mail = await OutboxMail.findOne({
		where: { recipient, sentAt: null },
		order: [['createdAt', 'DESC']]
	});
	if (!mail) return null;
	const token = /\/(?:invitation|reset|join)\/(\S+)/.exec(mail.textBody ?? '')?.[1] ?? '';
	return { mail, token, kind: mail.kind };
}

/** How many letters an address was ever sent. */
export const lettersTo = (recipient: string) => OutboxMail.count({ where: { recipient } });
