import type { Page } from '@playwright/test';
import { begin, drawFrom, onward, playOn, trialsOf } from './bench';
import { expect, go, ready, signIn, student, test } from './support';

const SEED = 90;

/** Attempts that this page's browser has sent. */
function sendings(page: Page): string[] {
	const bodies: string[] = [];
	page.context().on('request', (request) => {
		if (request.method() === 'POST' && request.url().endsWith('/api/attempts')) {
			bodies.push(request.postData() ?? '');
		}
	});
	return bodies;
}

interface Listed {
	attempts: { id: string; finishedAt: string }[];
}
const ownAttempts = async (page: Page) =>
	((await (await page.request.get('/api/attempts')).json()) as Listed).attempts;

async function playBlock(page: Page, lastBefore: () => Promise<void>) {
	const specs = trialsOf('unison', SEED);
	await playOn(page, specs.slice(0, 9), () => 1);
	await onward(page).press('Enter');
	await lastBefore();
	await playOn(page, specs.slice(9), () => 1);
	await onward(page).press('Enter');
}

test('a block that ends without a network is kept, then sent and stored once', async ({
	visit,
	expectFault
}) => {
	expectFault(/ERR_INTERNET_DISCONNECTED/);
	const page = await visit(student('sunniva'), '/practice/unison');
	const before = await ownAttempts(page);
	const sent = sendings(page);
	await drawFrom(page, SEED);
	await begin(page);
	await playBlock(page, () => page.context().setOffline(true));
	await expect(page.getByRole('heading', { name: 'This block is kept here.' })).toBeVisible();
	await expect(page.getByRole('status').filter({ hasText: 'No network.' })).toBeVisible();
	await page.getByRole('button', { name: 'Send it now' }).click();
	await expect(page.getByRole('heading', { name: 'This block is kept here.' })).toBeVisible();

	await page.context().setOffline(false);
	await expect(page.getByText('Stored.')).toBeVisible();
	await expect(page.getByText('kept here')).toHaveCount(0);
	const after = await ownAttempts(page);
	const added = after.filter(({ id }) => !before.some((known) => known.id === id));
	const ids = new Set(sent.map((body) => (JSON.parse(body) as { id: string }).id));
	expect(ids.size, 'whenever it was sent, it was the same attempt').toBe(1);
	expect(new Set(sent).size, 'in the same words').toBe(1);
	expect(added.map(({ id }) => id)).toEqual([...ids]);
});

test('what one student has kept is neither shown to nor sent by another on the same browser', async ({
	visit,
	expectFault
}) => {
	expectFault(/ERR_FAILED|ERR_INTERNET_DISCONNECTED/);
	const [corin, jory] = [student('corin'), student('jory')];
	const page = await visit(null, '/sign-in');
	await signIn(page, corin);
	await go(page, '/practice/unison');
	const corinBefore = await ownAttempts(page);
	await page
		.context()
		.route('**/api/attempts', (route) =>
			route.request().method() === 'POST' ? route.abort() : route.continue()
		);
	await drawFrom(page, SEED);
	await begin(page);
	await playBlock(page, async () => {});
	await expect(page.getByRole('heading', { name: 'This block is kept here.' })).toBeVisible();
	await page.context().unroute('**/api/attempts');

	// Signing out leads through a page of the server, so that nothing is sent on the way.
	await page.context().route('**/api/attempts', (route) => route.abort());
	await go(page, '/account');
	await page.getByRole('banner').getByRole('button', { name: 'Sign out' }).click();
	await expect(page).toHaveURL(/\/sign-in$/);
	await page.context().unroute('**/api/attempts');
	await ready(page);

	const sent = sendings(page);
	await signIn(page, jory);
	await go(page, '/today');
	await expect(page.getByText(/kept here/)).toHaveCount(0);
	await go(page, '/practice/unison');
	await expect(page.getByRole('button', { name: 'Begin ten trials' })).toBeEnabled();
	expect(sent, 'nothing of the other is sent').toEqual([]);
	await page.request.post('/sign-out', {
		form: {},
		headers: { origin: new URL(page.url()).origin }
	});

	await go(page, '/sign-in');
	await signIn(page, corin);
	await go(page, '/today');
	await expect.poll(() => sent.length).toBe(1);
	await expect
		.poll(async () => (await ownAttempts(page)).length)
		.toBe(Math.min(50, corinBefore.length + 1));
	const newest = (await ownAttempts(page)).map(({ id }) => id);
	expect(newest).toContain((JSON.parse(sent[0]) as { id: string }).id);
	await expect(page.getByText(/kept here/)).toHaveCount(0);
});
