import { randomUUID } from 'node:crypto';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { startMailSink, type MailSink } from '../../src/cli/mail-sink';
import { closeDatabase, database } from '../../src/lib/server/database';
import { resetEnv } from '../../src/lib/server/env';
import { readSink } from '../../src/lib/server/mail/sink';
import { resetLetter } from '../../src/lib/server/mail/templates';
import { closeTransport } from '../../src/lib/server/mail/transport';
import { OutboxMail } from '../../src/lib/server/models';
import {
	deliverDueMail,
	listOutbox,
	listReceived,
	queueLetter
} from '../../src/lib/server/services/mail';
import { person } from '../support/people';

const href = 'http://localhost:3000/reset/some_secret-token';
const letter = resetLetter({ name: 'Ingeborg Düne', href, minutes: 60 });

let folder: string;
let sink: MailSink;
const before = { ...process.env };

function useServer(url: string, sinkFolder?: string): void {
	closeTransport();
	process.env.SMTP_URL = url;
	if (sinkFolder) process.env.MAIL_SINK_DIR = sinkFolder;
	else delete process.env.MAIL_SINK_DIR;
	resetEnv();
}

beforeAll(async () => {
	folder = mkdtempSync(join(tmpdir(), 'ebbtone-mail-'));
	sink = await startMailSink(folder);
});
beforeEach(async () => {
	database();
	await OutboxMail.destroy({ where: {} });
	useServer(sink.url, folder);
});
afterEach(closeTransport);
afterAll(async () => {
	useServer(before.SMTP_URL ?? '');
	await sink.stop();
	rmSync(folder, { recursive: true, force: true });
	await closeDatabase();
});

async function queued(to = `${randomUUID()}@studio.example`): Promise<string> {
	await database().transaction((transaction) => queueLetter(letter, to, transaction));
	return to;
}
const row = (recipient: string) =>
	OutboxMail.findOne({ where: { recipient }, rejectOnEmpty: true });
const receivedBy = async (to: string) =>
	(await readSink(folder)).filter((mail) => mail.to.includes(to));

describe('the outbox', () => {
	it('sends a letter over SMTP once, and keeps nothing of what it said', async () => {
		const to = await queued();
		expect(await deliverDueMail()).toBe(1);
		expect(await deliverDueMail()).toBe(0);
		const [mail, ...more] = await receivedBy(to);
		expect(more).toEqual([]);
		expect(mail).toMatchObject({ subject: 'Choose a new password', links: [href] });
		expect(mail.text).toContain('Ingeborg Düne');
		expect(mail.html).toContain(`href="${href}"`);
		expect(await row(to)).toMatchObject({ textBody: null, htmlBody: null, attempts: 0 });
		expect((await row(to)).sentAt).toBeInstanceOf(Date);
	});

	it('sends each letter once when several servers deliver at the same moment', async () => {
		const all = await Promise.all(Array.from({ length: 8 }, () => queued()));
		const sent = await Promise.all([deliverDueMail(), deliverDueMail(), deliverDueMail()]);
		expect(sent.reduce((a, b) => a + b)).toBe(8);
		for (const to of all) expect((await receivedBy(to)).length).toBe(1);
	});

	it('writes nothing when what caused the letter fails', async () => {
		const to = `${randomUUID()}@studio.example`;
		const failing = database().transaction(async (transaction) => {
			await queueLetter(letter, to, transaction);
			throw new Error('something else failed');
		});
		await expect(failing).rejects.toThrow('something else failed');
		expect(await OutboxMail.count({ where: { recipient: to } })).toBe(0);
	});

	it('keeps a letter that cannot leave, tries again later, and gives up in the end', async () => {
		const to = await queued();
		useServer('smtp://127.0.0.1:1');
		let now = new Date();
		expect(await deliverDueMail(now)).toBe(0);
		let kept = await row(to);
		expect(kept).toMatchObject({ attempts: 1, sentAt: null, textBody: letter.text });
		expect(kept.nextAttemptAt.getTime()).toBeGreaterThan(now.getTime());
		expect(kept.lastError).toMatch(/ECONNREFUSED/);
		for (let i = 0; i < 20 && !kept.gaveUpAt; i++) {
			now = new Date(kept.nextAttemptAt.getTime() + 1000);
			await deliverDueMail(now);
			kept = await row(to);
		}
		expect(kept.gaveUpAt).not.toBeNull();
		expect(kept).toMatchObject({ attempts: 7, textBody: null });
		useServer(sink.url, folder);
		expect(await deliverDueMail(new Date(now.getTime() + 1e9))).toBe(0);
		expect(await receivedBy(to)).toEqual([]);
	});

	it('leaves when the mail server is back', async () => {
		const to = await queued();
		useServer('smtp://127.0.0.1:1');
		await deliverDueMail();
		useServer(sink.url, folder);
		expect(await deliverDueMail()).toBe(0);
		expect(await deliverDueMail(new Date(Date.now() + 120_000))).toBe(1);
		expect((await receivedBy(to)).length).toBe(1);
	});
});

describe('what the admin sees', () => {
	it('is the outbox without bodies, and the sink where there is one', async () => {
		const admin = await person('admin');
		const to = await queued();
		const lines = await listOutbox(admin);
		expect(lines.find((line) => line.recipient === to)).toMatchObject({
			kind: 'reset',
			sentAt: null
		});
		expect(JSON.stringify(lines)).not.toContain('some_secret-token');
		await deliverDueMail();
		expect((await listReceived(admin))?.some((mail) => mail.to.includes(to))).toBe(true);
		useServer(sink.url);
		expect(await listReceived(admin)).toBeNull();
	});

	it('passes over what is not a mail in the sink’s folder', async () => {
		writeFileSync(join(folder, '2999-rubbish.json'), '{"half":');
		writeFileSync(join(folder, '2999-other.json'), '{"id":7}');
		const to = await queued();
		await deliverDueMail();
		expect((await receivedBy(to)).length).toBe(1);
	});
});
