import AxeBuilder from '@axe-core/playwright';
import { expect, type Page } from '@playwright/test';

const WCAG = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22a', 'wcag22aa'];

/** No breach of WCAG 2.2 A or AA that a program can find. */
export async function expectAccessible(page: Page, where: string): Promise<void> {
	const { violations } = await new AxeBuilder({ page }).setLegacyMode().withTags(WCAG).analyze();
	const told = violations.map(
		({ id, nodes }) => `${id}: ${nodes.map((node) => node.target.join(' ')).join(' | ')}`
	);
	expect.soft(told, where).toEqual([]);
}
