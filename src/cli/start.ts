/**
 * `npm start`: starts everything and prints the one address to open. Settings by environment:
 * ORIGIN, HOST, PORT, DATABASE_URL, SMTP_URL, MAIL_FROM, AUTH_SECRET, EBBTONE_DEMO (true or false),
 * EBBTONE_ADMIN_EMAIL (the first admin of an empty installation without the demonstration).
 */
import { startApplication, type RunningApplication } from './application';
import { takeLock } from './setup/lock';
import { SetUpError } from './setup/run';

const say = (line: string) => console.error(line);

/** The demonstration's passwords are known to everybody, so by default it stays on this machine. */
function wantsDemo(): boolean {
	if (process.env.EBBTONE_DEMO) return process.env.EBBTONE_DEMO !== 'false';
	const names = [process.env.HOST ?? '127.0.0.1'];
	if (process.env.ORIGIN) names.push(new URL(process.env.ORIGIN).hostname);
	return names.every((name) => ['localhost', '127.0.0.1', '[::1]', '::1'].includes(name));
}

async function welcome(application: RunningApplication, demo: boolean): Promise<void> {
	console.log(`\nEbbtone is open at ${application.origin}\n`);
	if (demo) {
		const { DEMO_SIGN_INS } = await import('../lib/server/database/seeders');
		console.log('Demonstration sign-ins (all of these people are invented):');
		for (const { role, email, password } of DEMO_SIGN_INS) {
			console.log(`  ${role.padEnd(11)} ${email.padEnd(38)} ${password}`);
		}
		console.log('\nMail goes nowhere: the admin reads it under Mail. Ctrl-C stops everything.');
	} else {
		await firstAdmin();
	}
}

async function firstAdmin(): Promise<void> {
	const email = process.env.EBBTONE_ADMIN_EMAIL;
	if (!email) return;
	const { closeDatabase } = await import('../lib/server/database');
	const { createFirstAdmin } = await import('../lib/server/services/users');
	try {
		const link = await createFirstAdmin(email, 'Admin');
		if (link) console.log(`The first admin chooses a password under ${link}`);
	} finally {
		await closeDatabase();
	}
}

let application: RunningApplication | undefined;
const asked = new AbortController();
const askedToStop = new Promise<number>((resolve) => {
	asked.signal.addEventListener('abort', () => resolve(0));
});
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
	process.on(signal, () => asked.abort());
}
// If whoever started us is gone without a word, nobody is left who would stop us.
const parent = process.ppid;
setInterval(() => {
	if (process.ppid !== parent) asked.abort();
}, 1000).unref();

let code: number;
let unlock: () => void = () => {};
try {
	unlock = takeLock('start', (pid) => `Ebbtone runs from this folder already (process ${pid}).`);
	const demo = wantsDemo();
	application = await startApplication({ demo, say, signal: asked.signal });
	await welcome(application, demo);
	code = await Promise.race([application.ended, askedToStop]);
	if (!asked.signal.aborted && code !== 0)
		say('The server ended unexpectedly; the reason stands above.');
} catch (problem) {
	code = asked.signal.aborted ? 0 : 1;
	// A whole error of the database may carry a connection string.
	if (code !== 0) say(problem instanceof Error ? problem.message : 'Start failed.');
	if (code !== 0 && !(problem instanceof SetUpError) && process.env.EBBTONE_DEBUG)
		console.error(problem);
} finally {
	if (application) say('Stopping …');
	await application?.stop();
	unlock();
}
process.exit(code);
