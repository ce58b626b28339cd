/** The string check as a student uses it. */
import { expect, type Page, type Request } from '@playwright/test';

/** Everything that this page sends anywhere, from now on. */
export function sent(page: Page): Request[] {
	const requests: Request[] = [];
	page.context().on('request', (request) => {
		if (request.postDataBuffer() !== null || request.method() !== 'GET') requests.push(request);
	});
	return requests;
}

/** No sound leaves the browser: what was sent are a few kilobytes of JSON, numbers and names. */
export function expectNumbersOnly(requests: readonly Request[]): void {
	expect(requests.map((request) => new URL(request.url()).pathname)).toEqual([
		'/api/string-checks'
	]);
	const [request] = requests;
	expect(request.headers()['content-type']).toBe('application/json');
	expect(request.postDataBuffer()?.length).toBeLessThan(20_000);
	const longest = (value: unknown): number => {
		if (value === null || typeof value !== 'object') return 0;
		const inner = Object.values(value);
		return Math.max(Array.isArray(value) ? value.length : 0, ...inner.map(longest));
	};
	expect(longest(request.postDataJSON()), 'no list is long enough to be sound').toBeLessThan(200);
}

export const stored = (page: Page) =>
	expect(page.getByText('These numbers are in your record.')).toBeVisible({ timeout: 60_000 });

/** The frequency that stands under a note's name in the result. */
export async function firstPartialShown(page: Page, note: string): Promise<number> {
	const shown = page.locator('.sheet-note > div').filter({ hasText: note }).locator('.f1').first();
	return Number.parseFloat((await shown.textContent()) ?? '');
}
