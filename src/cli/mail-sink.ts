import { randomBytes } from 'node:crypto';
import { mkdirSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { AddressObject } from 'mailparser';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import type { ReceivedMail } from '../lib/server/mail/sink';
import { freePort } from './setup/ports';

/** A local SMTP server that keeps what it receives and passes nothing on. */
export interface MailSink {
	/** For SMTP_URL. */
	url: string;
	stop(): Promise<void>;
}

const LARGEST_MAIL_BYTES = 2_000_000;

const addresses = (from: AddressObject | AddressObject[] | undefined): string[] =>
	[from ?? []].flat().flatMap((a) => a.value.map((v) => v.address ?? ''));

/** Writes one received mail as JSON: first beside, then renamed, so that no reader sees half of it. */
async function keep(raw: Buffer, envelopeTo: string[], folder: string): Promise<void> {
	const mail = await simpleParser(raw, { skipImageLinks: true });
	const receivedAt = new Date().toISOString();
	const id = `${receivedAt.replace(/[:.]/g, '-')}-${randomBytes(3).toString('hex')}`;
	const text = mail.text ?? '';
	const received: ReceivedMail = {
		id,
		receivedAt,
		from: mail.from?.text ?? '',
		to: envelopeTo.length > 0 ? envelopeTo : addresses(mail.to),
		subject: mail.subject ?? '',
		text,
		html: typeof mail.html === 'string' ? mail.html : null,
		links: [...new Set(text.match(/https?:\/\/[^\s<>"]+/g) ?? [])]
	};
	const path = join(folder, `${id}.json`);
	writeFileSync(`${path}.part`, JSON.stringify(received, null, '\t'), { mode: 0o600 });
	renameSync(`${path}.part`, path);
}

/** Starts the sink on a free loopback port; received mails go to the folder, one JSON file each. */
export async function startMailSink(folder: string): Promise<MailSink> {
	mkdirSync(folder, { recursive: true, mode: 0o700 });
	const server = new SMTPServer({
		authOptional: true,
		disabledCommands: ['AUTH', 'STARTTLS'],
		size: LARGEST_MAIL_BYTES,
		disableReverseLookup: true,
		onData(stream, session, done) {
			const chunks: Buffer[] = [];
			stream.on('data', (chunk: Buffer) => chunks.push(chunk));
			stream.on('end', () => {
				if (stream.sizeExceeded) return done(new Error('The mail is too large.'));
				const to = session.envelope.rcptTo.map((recipient) => recipient.address);
				keep(Buffer.concat(chunks), to, folder).then(
					() => done(),
					() => done(new Error('The mail could not be kept.'))
				);
			});
		}
	});
	server.on('error', () => {
		// A client that hangs up in the middle is its own problem.
	});
	const port = await freePort();
	await new Promise<void>((resolve, reject) => {
		server.once('error', reject);
		server.listen(port, '127.0.0.1', () => resolve());
	});
	return {
		url: `smtp://127.0.0.1:${port}`,
		stop: () => new Promise((resolve) => server.close(() => resolve()))
	};
}
