import type { Page } from '@playwright/test';
import { expectAccessible } from './axe';
import { onward } from './bench';
import { shot, TOURS } from './pages';
import { expectSound } from './sound';
import { expect, go, ready, student, TEACHER, test } from './support';

/** How far the page reaches beyond the screen, and what does, for the message. */
async function expectNoSideways(page: Page, where: string): Promise<void> {
	const beyond = await page.evaluate(() => {
		const width = document.documentElement.clientWidth;
		const culprits = [...document.querySelectorAll('body *')].filter((element) => {
			const { left, right } = element.getBoundingClientRect();
			return right > width + 1 && left < right;
		});
		return {
			pixels: document.documentElement.scrollWidth - width,
			culprits: culprits.slice(0, 5).map((element) => `${element.nodeName}.${element.className}`)
		};
	});
	expect.soft(beyond.pixels, `${where}: ${beyond.culprits.join(', ')}`).toBeLessThanOrEqual(0);
}

for (const { role, who, places } of TOURS) {
	test(`no page of a ${role} scrolls sideways on a phone`, async ({ visit, expectFault }) => {
		expectFault(/status of 404/);
		const page = await visit(who);
		for (const { name, path } of await places(page)) {
			await go(page, path);
			await expectNoSideways(page, `${role} ${path}`);
			await shot(page, `phone-${role}-${name}`);
		}
	});
}

test('in a table each cell stands beside its head', async ({ visit }) => {
	const page = await visit(TEACHER, '/classes');
	await page.getByRole('link', { name: 'Open Evening class, first term' }).tap();
	const cells = page.getByRole('cell').filter({ hasText: /^\s*\d+, \d+\s*$/ });
	await expect(cells).toHaveCount(6);
	for (const cell of await cells.all()) {
		const [outer, inner] = [await cell.boundingBox(), await cell.locator('.cell').boundingBox()];
		expect(inner?.x, 'to the right of the head').toBeGreaterThan((outer?.x ?? 0) + 90);
		expect(outer?.height, 'on one line').toBeLessThan(40);
	}
});

test('the rooms fold into a menu', async ({ visit }) => {
	const page = await visit(student('jory'), '/today');
	await page.getByRole('banner').locator('summary').tap();
	const rooms = page.getByRole('navigation', { name: 'Rooms' });
	await expect(rooms.getByRole('link', { name: 'String check' })).toBeVisible();
	await expectNoSideways(page, 'the open menu');
	await expectAccessible(page, 'phone-menu');
	await rooms.getByRole('link', { name: 'Progress' }).tap();
	await expect(page).toHaveURL(/\/progress$/);
});

/** Draws the lever sideways with one finger. */
async function draw(page: Page, byPx: number): Promise<void> {
	const lever = page.getByRole('img', { name: /tuning lever/ });
	await lever.scrollIntoViewIfNeeded();
	const box = await lever.boundingBox();
	if (!box) throw new Error('The lever is not on the page.');
	const [x, y] = [box.x + box.width / 2, box.y + box.height / 2];
	const hand = await page.context().newCDPSession(page);
	const touch = (type: 'touchStart' | 'touchMove' | 'touchEnd', atX?: number) =>
		hand.send('Input.dispatchTouchEvent', {
			type,
			touchPoints: atX === undefined ? [] : [{ x: atX, y }]
		});
	await touch('touchStart', x);
	for (let i = 1; i <= 10; i++) await touch('touchMove', x + (byPx * i) / 10);
	await touch('touchEnd');
}

test('a trial by touch', async ({ visit }) => {
	const page = await visit(student('mirabel'), '/practice/unison');
	await ready(page);
	await page.getByRole('button', { name: /Begin ten trials|Drop it and begin anew/ }).tap();
	await expect(page.getByRole('button', { name: 'Strike both' })).toBeVisible();
	await expectNoSideways(page, 'the bench');
	await shot(page, 'phone-bench');
	await page.getByRole('button', { name: 'Strike both' }).tap();
	await expectSound(page);
	await page.getByRole('button', { name: 'Much sharper' }).tap();
	await page.getByRole('button', { name: 'A hair flatter' }).tap();
	await draw(page, 60);
	// A page that still rolls after the draw takes the first tap as the end of rolling, as a hand knows.
	await expect(async () => {
		const leave = page.getByRole('button', { name: 'Leave it there' });
		if (await leave.isVisible()) await leave.tap();
		await expect(onward(page)).toBeVisible({ timeout: 4000 });
	}).toPass({ timeout: 30_000 });
	await expectNoSideways(page, 'the reveal');
	await expectAccessible(page, 'phone-reveal');
	const moved = await page.evaluate(
		() =>
			new Promise<number>((resolve) => {
				const opening = indexedDB.open('ebbtone');
				opening.onsuccess = () => {
					const all = opening.result.transaction('blocks').objectStore('blocks').getAll();
					all.onsuccess = () => {
						const [{ trials }] = all.result as {
							trials: { startCents: number; committedCents: number }[];
						}[];
						opening.result.close();
						resolve(trials[0].committedCents - trials[0].startCents);
					};
				};
			})
	);
	// 20 pixels are a cent: 5 by the button, 0.05 back, 3 by the lever.
	expect(moved).toBeGreaterThan(7);
	expect(moved).toBeLessThan(8.5);
});
