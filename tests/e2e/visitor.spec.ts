import type { Page } from '@playwright/test';
import { expectSound, loudness } from './sound';
import { expect, go, tabTo, test } from './support';

/** Scripts that the page has asked for, with what is in them. */
function scriptsOf(page: Page) {
	const bodies: Promise<string>[] = [];
	page.on('response', (response) => {
		if (/\.js(\?|$)/.test(response.url())) bodies.push(response.text().catch(() => ''));
	});
	return async () => (await Promise.all(bodies)).filter((text) => /AudioContext/.test(text)).length;
}

type Watching = typeof globalThis & { changes: string[] };

/**
 * While one tone sounds: the page's picture again and again, and what changed in its text or style.
 * @returns null when the tone ended before that, on a busy machine
 */
async function whileOneSounds(page: Page) {
	const sounding = page.locator('.tone.sounding');
	await expect(sounding).toHaveCount(1);
	const animations = () => page.evaluate(() => document.getAnimations().length);
	await expect.poll(animations, { message: 'the button that was pressed is at rest' }).toBe(0);
	await page.evaluate(() => {
		const here = globalThis as Watching;
		here.changes = [];
		new MutationObserver((records) =>
			here.changes.push(...records.map(({ type, target }) => `${type} of ${target.nodeName}`))
		).observe(document.documentElement, {
			attributes: true,
			characterData: true,
			childList: true,
			subtree: true
		});
	});
	const which = await sounding.allTextContents();
	const pictures: Buffer[] = [];
	const levels: number[] = [];
	for (let i = 0; i < 3; i++) {
		pictures.push(await page.screenshot({ animations: 'allow' }));
		levels.push(await loudness(page));
	}
	const changes = await page.evaluate(() => (globalThis as Watching).changes);
	const moving = await animations();
	const same = which.length === 1 && (await sounding.allTextContents())[0] === which[0];
	return same ? { pictures, levels, changes, moving } : null;
}

/** Listens again until one tone was looked at from beginning to end. */
async function lookWhileItSounds(page: Page) {
	for (let i = 0; i < 12; i++) {
		const seen = await whileOneSounds(page);
		if (seen) return seen;
		const again = page.getByRole('button', { name: 'Listen again' });
		if ((await page.locator('.tone.sounding').count()) === 0) await again.click();
		await page.mouse.move(2, 2);
	}
	throw new Error('No tone lasted long enough to be looked at.');
}

const shores = (page: Page) => page.locator('.shores').getByRole('img');

test('the first page says what Ebbtone is on one screen', async ({ visit }) => {
	const page = await visit(null);
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('Learn to tune a piano by ear.');
	for (const part of [
		page.getByText('You know music already.'),
		page.getByRole('link', { name: 'Try it: which one beats?' }),
		page.getByRole('main').getByRole('link', { name: 'Sign in' }),
		page.getByText('two strings a little apart: a beat every 0.8 seconds')
	]) {
		await expect(part).toBeInViewport({ ratio: 1 });
	}
});

test('three tones by mouse: silence and no audio script before Listen, nothing moves before the answer', async ({
	visit
}) => {
	const page = await visit(null, '/cautions');
	const withAudio = scriptsOf(page);
	await go(page, '/');
	await page.getByRole('link', { name: 'Try it: which one beats?' }).click();
	await expect(page.getByRole('heading', { level: 1 })).toHaveText(
		'Three soft tones. Which one beats?'
	);
	await page.waitForLoadState('networkidle');
	expect(await withAudio(), 'audio scripts before Listen').toBe(0);
	await expect(page.getByRole('button', { name: '1 The first' })).toBeDisabled();

	await page.getByRole('button', { name: 'Listen' }).click();
	await expectSound(page);
	expect(await withAudio(), 'audio scripts after Listen').toBeGreaterThan(0);
	await page.mouse.move(2, 2);
	const seen = await lookWhileItSounds(page);
	expect(seen.changes).toEqual([]);
	expect(seen.moving, 'nothing is animated').toBe(0);
	for (const picture of seen.pictures) expect(picture.equals(seen.pictures[0])).toBe(true);
	expect(new Set(seen.levels).size, 'the loudness itself did change').toBeGreaterThan(1);

	await page.getByRole('button', { name: '2 The second' }).click();
	const verdict = page.getByRole('heading', { level: 1 });
	await expect(verdict).toHaveText(/^(Yes: the second beats|No: the (first|third) beats, not)/);
	await expect(verdict).toBeFocused();
	await expect(shores(page).filter({ visible: true })).toHaveCount(3);
	const beating = page.locator('.shores').getByText(/^\d\.\d beats per second/);
	await expect(beating).toHaveCount(1);
	await expect.poll(() => loudness(page), { message: 'silence' }).toBeLessThan(0.001);
	await page.getByRole('button', { name: 'Hear the first' }).click();
	await expectSound(page);
});

test('three tones by the keyboard alone', async ({ visit }) => {
	const page = await visit(null);
	await tabTo(page, page.getByRole('link', { name: 'Try it: which one beats?' }));
	await page.keyboard.press('Enter');
	const trial = page.getByRole('region', { name: 'Listening trial' });
	await tabTo(page, trial);
	await page.keyboard.press('2');
	await expect(page.getByRole('heading', { level: 1 })).toHaveText(/Which one beats/);
	await page.keyboard.press('Space');
	await expectSound(page);
	await page.keyboard.press('3');
	await expect(page.getByRole('heading', { level: 1 })).toBeFocused();
	await expect(shores(page).filter({ visible: true })).toHaveCount(3);
	await tabTo(page, page.getByRole('button', { name: 'Hear the third' }));
	await page.keyboard.press('Space');
	await expectSound(page);
	await tabTo(page, page.getByRole('button', { name: 'Another three' }));
	await page.keyboard.press('Enter');
	await expect(page.getByRole('button', { name: /Listen/ })).toBeVisible();
});
