/** What the browser tests share: people who are signed in, faults that are noticed, letters that came. */
import {
	test as base,
	type APIRequestContext,
	expect,
	type Browser,
	type BrowserContext,
	type Page
} from '@playwright/test';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import {
	ADMIN,
	COLLEAGUE,
	STUDENTS,
	TEACHER
} from '../../src/lib/server/database/seeders/demo-people';
import type { ReceivedMail } from '../../src/lib/server/mail/sink';
import { tapLoudspeaker } from './sound';

export { ADMIN, COLLEAGUE, expect, STUDENTS, TEACHER };

export interface Person {
	email: string;
	password: string;
}

export const origin = () => process.env.EBBTONE_E2E_ORIGIN ?? '';

/** A demo student by the first word of the name. */
export function student(key: string): (typeof STUDENTS)[number] {
	const found = STUDENTS.find((one) => one.key === key);
	if (!found) throw new Error(`The demonstration has no student ${key}.`);
	return found;
}

interface Fixtures {
	/** Names a console or page error that this test causes on purpose. */
	expectFault: (pattern: RegExp) => void;
	/** Asks the server as a browser without a page would, with a person's cookies or a stranger's. */
	ask: (who: Person | null) => Promise<APIRequestContext>;
	/** A fresh browser: a stranger's (null) or a person's who is signed in; opens `path`. */
	visit: (who: Person | null, path?: string) => Promise<Page>;
}

interface Underneath {
	faults: { seen: string[]; expected: RegExp[] };
	open: (who: Person | null) => Promise<BrowserContext>;
}

/**
 * Every page of every test is watched: an error on the console, an uncaught one, or a breach of the
 * content policy fails the test unless it was expected.
 */
export const test = base.extend<Fixtures & Underneath>({
	// Playwright finds out what a fixture needs by reading this pattern.
	// eslint-disable-next-line no-empty-pattern
	faults: async ({}, use) => {
		const faults = { seen: [] as string[], expected: [] as RegExp[] };
		await use(faults);
		const surprising = faults.seen.filter((text) => !faults.expected.some((e) => e.test(text)));
		expect(surprising, 'errors on the console').toEqual([]);
	},
	expectFault: async ({ faults }, use) => {
		await use((pattern) => void faults.expected.push(pattern));
	},
	open: async ({ browser }, use, testInfo) => {
		const opened: BrowserContext[] = [];
		const folder = join(testInfo.project.outputDir, '.sessions');
		await use(async (who) => {
			const storageState = who ? await session(browser, who, folder) : undefined;
			const context = await browser.newContext({ storageState });
			opened.push(context);
			return context;
		});
		for (const context of opened) await context.close();
	},
	ask: async ({ open }, use) => {
		await use(async (who) => (await open(who)).request);
	},
	visit: async ({ open, faults }, use) => {
		await use(async (who, path = '/') => {
			const context = await open(who);
			watch(context, faults.seen);
			await context.addInitScript(tapLoudspeaker);
			const page = await context.newPage();
			await go(page, path);
			return page;
		});
	}
});

function watch(context: BrowserContext, seen: string[]): void {
	context.on('console', (message) => {
		if (message.type() === 'error') seen.push(`${message.text()} (${message.location().url})`);
	});
	context.on('weberror', (error) => seen.push(String(error.error().stack)));
}

/** The cookies of a signed-in person; signs in once a run, as often as there are people. */
async function session(browser: Browser, who: Person, folder: string): Promise<string> {
	const { email, password } = who;
	const key = createHash('sha256').update(password).digest('hex').slice(0, 8);
	const file = join(folder, `${email}-${key}.json`);
	if (existsSync(file)) return file;
	mkdirSync(folder, { recursive: true });
	const context = await browser.newContext();
	const answer = await context.request.post('/sign-in', {
		form: { email, password, redirectTo: '' },
		headers: { origin: origin(), accept: 'text/html' }
	});
	expect(answer.url(), 'signing in leads elsewhere').not.toContain('/sign-in');
	await context.storageState({ path: file });
	await context.close();
	return file;
}

/** Opens an address and waits until the page answers to the hand, not only to the eye. */
export async function go(page: Page, path: string): Promise<void> {
	await page.goto(path);
	await ready(page);
}

/** SvelteKit takes over scrolling once every part of the page works. */
export async function ready(page: Page): Promise<void> {
	await page.waitForFunction(() => history.scrollRestoration === 'manual');
}

/** Fills in the sign-in page and waits until it leads somewhere. */
export async function signIn(page: Page, { email, password }: Person): Promise<void> {
	await page.getByLabel('E-mail address').fill(email);
	await page.getByLabel('Password').fill(password);
	await page.getByRole('button', { name: 'Sign in' }).click();
	await expect(page).not.toHaveURL(/\/sign-in/);
}

/** The newest letter to an address, with this in its subject; waits until it has come. */
export async function letterTo(address: string, subject: RegExp): Promise<ReceivedMail> {
	const folder = process.env.EBBTONE_E2E_MAIL ?? '';
	const find = () =>
		readdirSync(folder)
			.filter((name) => name.endsWith('.json'))
			.sort()
			.reverse()
			.map((name) => JSON.parse(readFileSync(join(folder, name), 'utf8')) as ReceivedMail)
			.find((mail) => mail.to.includes(address) && subject.test(mail.subject));
	await expect.poll(find, { message: `a letter to ${address}` }).toBeTruthy();
	return find() as ReceivedMail;
}

/** Presses Tab until this has the focus, as somebody without a mouse does. */
export async function tabTo(page: Page, locator: ReturnType<Page['locator']>): Promise<void> {
	await expect(locator).toHaveCount(1);
	for (let i = 0; i < 80; i++) {
		if (await locator.evaluate((element) => element === document.activeElement)) return;
		await page.keyboard.press('Tab');
	}
	throw new Error(`Tab never reaches ${locator}.`);
}
