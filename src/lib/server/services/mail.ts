import { Op, QueryTypes, type Transaction } from 'sequelize';
import type { Actor } from '../auth';
import { database } from '../database';
import { env } from '../env';
import { log } from '../log';
import { readSink, type ReceivedMail } from '../mail/sink';
import type { Letter } from '../mail/templates';
import { sendBySmtp } from '../mail/transport';
import { OutboxMail } from '../models';
import { mustBeAdmin } from './audit';

/** Pauses between tries, minutes; after the last one the mail is given up. */
const PAUSES_MINUTES = [1, 5, 15, 60, 240, 720];
const LOOK_EVERY_MS = 15_000;

/**
 * Puts a letter into the outbox, in the transaction of what caused it: either both happen or neither.
 * It leaves soon after the transaction has been committed.
 */
export async function queueLetter(
	letter: Letter,
	recipient: string,
	transaction: Transaction
): Promise<void> {
	await OutboxMail.create(
		{
			kind: letter.kind,
			recipient,
			subject: letter.subject,
			textBody: letter.text,
			htmlBody: letter.html
		},
		{ transaction }
	);
	transaction.afterCommit(() => wake?.());
}

/**
 * Sends every mail that is due. Several servers may do this at once: each mail is held by one.
 * @returns how many left.
 */
export async function deliverDueMail(now = new Date()): Promise<number> {
	let sent = 0;
	for (;;) {
		const outcome = await deliverOne(now);
		if (outcome === 'none') return sent;
		if (outcome === 'sent') sent++;
	}
}

async function deliverOne(now: Date): Promise<'none' | 'sent' | 'kept'> {
	return database().transaction(async (transaction) => {
		const mail = await OutboxMail.findOne({
			where: { sentAt: null, gaveUpAt: null, nextAttemptAt: { [Op.lte]: now } },
			order: [['nextAttemptAt', 'ASC']],
			lock: true,
			skipLocked: true,
			transaction
		});
		if (!mail) return 'none';
		try {
			await sendBySmtp({
				to: mail.recipient,
				subject: mail.subject,
				text: mail.textBody ?? '',
				html: mail.htmlBody ?? '',
				// The same at each try, so that a mail sent twice is shown once.
				messageId: `<${mail.id}@${new URL(env().ORIGIN).hostname}>`
			});
			// The links in it are secrets: nothing of them stays here.
			await mail.update({ sentAt: new Date(), textBody: null, htmlBody: null }, { transaction });
			return 'sent';
		} catch (problem) {
			await keepForLater(mail, problem, now, transaction);
			return 'kept';
		}
	});
}

async function keepForLater(
	mail: OutboxMail,
	problem: unknown,
	now: Date,
	transaction: Transaction
) {
	const message = problem instanceof Error ? problem.message : 'unknown';
	log().warn({ mail: mail.id, reason: message }, 'mail not sent');
	const pause = PAUSES_MINUTES[mail.attempts];
	const changes =
		pause === undefined
			? { gaveUpAt: now, textBody: null, htmlBody: null }
			: { nextAttemptAt: new Date(now.getTime() + pause * 60_000) };
	await mail.update(
		{ ...changes, attempts: mail.attempts + 1, lastError: message.slice(0, 300) },
		{ transaction }
	);
}

let wake: (() => void) | undefined;

/** Sends mail for as long as this process runs. @returns a function that ends it. */
export function startMailDelivery(): () => Promise<void> {
	let running: Promise<unknown> = Promise.resolve();
	let again = false;
	let busy = false;
	const round = () => {
		if (busy) {
			again = true;
			return;
		}
		busy = true;
		running = deliverDueMail()
			.catch((problem: Error) => log().error({ reason: problem.message }, 'mail delivery'))
			.finally(() => {
				busy = false;
				if (again) {
					again = false;
					round();
				}
			});
	};
	const timer = setInterval(round, LOOK_EVERY_MS);
	timer.unref();
	wake = () => void setImmediate(round);
	round();
	return async () => {
		clearInterval(timer);
		wake = undefined;
		again = false;
		await running;
	};
}

export interface OutboxLine {
	id: string;
	recipient: string;
	kind: string;
	subject: string;
	createdAt: Date;
	sentAt: Date | null;
	gaveUpAt: Date | null;
	attempts: number;
	lastError: string | null;
}

/** The newest hundred mails of the outbox, without their bodies. */
export async function listOutbox(actor: Actor): Promise<OutboxLine[]> {
	mustBeAdmin(actor);
	return database().query<OutboxLine>(
		`SELECT id, recipient, kind, subject, created_at AS "createdAt", sent_at AS "sentAt",
			gave_up_at AS "gaveUpAt", attempts, last_error AS "lastError"
		FROM mail_outbox ORDER BY created_at DESC LIMIT 100`,
		{ type: QueryTypes.SELECT }
	);
}

/** What the local sink received; null when mail goes to a real server, where nobody may read it. */
export async function listReceived(actor: Actor): Promise<ReceivedMail[] | null> {
	mustBeAdmin(actor);
	const folder = env().MAIL_SINK_DIR;
	return folder ? readSink(folder) : null;
}
