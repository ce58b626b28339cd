import type { Page } from '@playwright/test';
import type { BlockInProgress } from '../../src/lib/offline/database';
import { bench, onward } from './bench';
import { expectSound } from './sound';
import { expect, student, tabTo, test } from './support';

/** What the browser has kept of the unison block under way: its last trial as it will be handed in. */
const lastTrial = (page: Page) =>
	page.evaluate(
		() =>
			new Promise<BlockInProgress['trials'][number] | undefined>((resolve, reject) => {
				const opening = indexedDB.open('ebbtone');
				opening.onerror = () => reject(opening.error);
				opening.onsuccess = () => {
					const all = opening.result.transaction('blocks').objectStore('blocks').getAll();
					all.onerror = () => reject(all.error);
					all.onsuccess = () => {
						const [block] = all.result as BlockInProgress[];
						opening.result.close();
						resolve(block?.trials.at(-1));
					};
				};
			})
	);

test('from the sign-in page to the end of a trial without a mouse', async ({ visit }) => {
	const ansel = student('ansel');
	const page = await visit(null, '/today');
	await expect(page).toHaveURL(/\/sign-in\?redirectTo=%2Ftoday$/);
	await page.keyboard.press('Tab');
	await expect(page.getByRole('link', { name: /Skip/i })).toBeFocused();
	await tabTo(page, page.getByLabel('E-mail address'));
	await page.keyboard.type(ansel.email);
	await page.keyboard.press('Tab');
	await page.keyboard.type(ansel.password);
	await page.keyboard.press('Enter');
	await expect(page).toHaveURL(/\/today$/);

	await tabTo(
		page,
		page.getByRole('navigation', { name: 'Rooms' }).getByRole('link', { name: 'Practice' })
	);
	await page.keyboard.press('Enter');
	await tabTo(page, page.getByRole('link', { name: 'Unisons' }));
	await page.keyboard.press('Enter');
	await expect(page.getByRole('button', { name: 'Begin ten trials' })).toBeEnabled();
	await tabTo(page, page.getByRole('radio', { name: 'Moderate' }));
	await page.keyboard.press('ArrowLeft');
	await expect(page.getByRole('radio', { name: 'Soft' })).toBeChecked();
	await page.keyboard.press('Shift+Tab');
	await expect(page.getByRole('button', { name: 'Begin ten trials' })).toBeFocused();
	await page.keyboard.press('Enter');

	await expect(bench(page)).toBeFocused();
	await page.keyboard.press('Space');
	await expectSound(page);
	await page.keyboard.press('ArrowRight');
	await tabTo(page, page.getByRole('button', { name: 'A hair sharper' }));
	await page.keyboard.press('Space');
	await page.keyboard.press('Space');
	await tabTo(page, page.getByRole('button', { name: 'Leave it there' }));
	await page.keyboard.press('Enter');
	await expect(onward(page)).toBeFocused();

	const trial = await lastTrial(page);
	const kinds = trial?.trace.map(([, kind]) => kind) ?? [];
	expect(
		kinds.filter((kind) => kind === 'strike'),
		'one blow: Space on a button presses it'
	).toHaveLength(1);
	expect(kinds).toContain('move');
	const moved = (trial?.committedCents ?? 0) - (trial?.startCents ?? 0);
	expect(moved).toBeCloseTo(0.5 + 2 * 0.05, 6);

	await tabTo(page, page.getByRole('button', { name: 'Hear the target' }));
	await page.keyboard.press('Space');
	await expectSound(page);
	await tabTo(page, page.getByRole('link', { name: 'Leave the bench' }));
	await page.keyboard.press('Enter');
	await expect(page).toHaveURL(/\/practice$/);
});

test('the letter keys can be switched off', async ({ visit }) => {
	const page = await visit(student('ansel'), '/practice/unison');
	await page.getByRole('button', { name: /Begin ten trials|Drop it and begin anew/ }).click();
	await expect(bench(page)).toBeFocused();
	await page.getByRole('button', { name: 'Letter keys off' }).click();
	await bench(page).focus();
	await page.keyboard.press('Space');
	await page.keyboard.press('h');
	await page.keyboard.press('1');
	await page.keyboard.press('Enter');
	await expect(onward(page)).toBeFocused();
	const trial = await lastTrial(page);
	expect(trial?.trace.map(([, kind]) => kind)).toEqual(['strike']);
});
