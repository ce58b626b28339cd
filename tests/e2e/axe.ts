import AxeBuilder from '@axe-core/playwright';
import { expect, type Page } from '@playwright/test';
import { shot } from './pages';

const WCAG = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22a', 'wcag22aa'];

async function breaches(axe: AxeBuilder): Promise<string[]> {
	const { violations } = await axe.analyze();
	return violations.map(
		({ id, nodes }) => `${id}: ${nodes.map((node) => node.target.join(' ')).join(' | ')}`
	);
}

/**
 * No breach of WCAG 2.2 A or AA that a program can find: everything by day, the contrast once more
 * in the evening's colours.
 */
export async function expectAccessible(page: Page, where: string): Promise<void> {
	await page.emulateMedia({ colorScheme: 'light', reducedMotion: 'reduce' });
	const all = new AxeBuilder({ page }).setLegacyMode().withTags(WCAG);
	expect.soft(await breaches(all), `${where}, by day`).toEqual([]);
	await shot(page, `${where}-day`);
	await page.emulateMedia({ colorScheme: 'dark', reducedMotion: 'reduce' });
	const contrast = new AxeBuilder({ page }).setLegacyMode().withRules(['color-contrast']);
	expect.soft(await breaches(contrast), `${where}, in the evening`).toEqual([]);
	await shot(page, `${where}-evening`);
	await page.emulateMedia({ colorScheme: 'light', reducedMotion: 'reduce' });
}
