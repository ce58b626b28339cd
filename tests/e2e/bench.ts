/** Works at the bench of a drill, by the keyboard. */
import { expect, type Page } from '@playwright/test';
import { generateBlock, type ScoredDrillId, type TrialSpec } from '../../src/lib/drills';

/** Whole steps of 0.05 cents that a key moves the string, largest first. */
const KEYS = [
	{ steps: 100, up: 'PageUp', down: 'PageDown' },
	{ steps: 10, up: 'ArrowRight', down: 'ArrowLeft' },
	{ steps: 1, up: 'Shift+ArrowRight', down: 'Shift+ArrowLeft' }
];

/** The next block of this page is drawn from this seed, so that the test knows where each string starts. */
export async function drawFrom(page: Page, seed: number): Promise<void> {
	await page.addInitScript((fixed) => {
		const random = crypto.getRandomValues.bind(crypto);
		crypto.getRandomValues = ((array: Uint32Array<ArrayBuffer>) => {
			if (!(array instanceof Uint32Array) || array.length !== 1) return random(array);
			array[0] = fixed;
			return array;
		}) as typeof crypto.getRandomValues;
	}, seed);
	await page.reload();
}

export const trialsOf = (drill: ScoredDrillId, seed: number): readonly TrialSpec[] =>
	generateBlock(drill, seed).trials;

export const bench = (page: Page) => page.getByRole('application');
export const onward = (page: Page) =>
	page.getByRole('button', { name: /Next trial|See the block/ });

/** @returns where the string now is, cents above its target: as near to `cents` as its steps allow. */
export async function moveTo(page: Page, spec: TrialSpec, cents: number): Promise<number> {
	const steps = Math.round((cents - spec.startCents) / 0.05);
	let left = Math.abs(steps);
	for (const key of KEYS) {
		for (; left >= key.steps; left -= key.steps) {
			await page.keyboard.press(steps > 0 ? key.up : key.down);
		}
	}
	return Math.round(100 * spec.startCents + 5 * steps) / 100;
}

/** One trial: strike, move, leave it there; the reveal stands then. @returns where it was left. */
export async function playTrial(page: Page, spec: TrialSpec, cents: number): Promise<number> {
	await expect(bench(page)).toBeFocused();
	await page.keyboard.press('Space');
	const left = await moveTo(page, spec, cents);
	await page.keyboard.press('Enter');
	await expect(onward(page)).toBeFocused();
	return left;
}

/** Trials from the present one on, each left where `cents` says, up to the last one's reveal. */
export async function playOn(
	page: Page,
	specs: readonly TrialSpec[],
	cents: (index: number) => number
): Promise<number[]> {
	const left: number[] = [];
	for (const spec of specs) {
		if (left.length > 0) await page.keyboard.press('Enter');
		left.push(await playTrial(page, spec, cents(spec.index)));
	}
	return left;
}

/** Begins a block on the drill's own page. */
export async function begin(page: Page): Promise<void> {
	await page.getByRole('button', { name: 'Begin ten trials' }).click();
	await expect(bench(page)).toBeFocused();
}

/** The middle of the errors' sizes. */
export function medianSize(errors: readonly number[]): number {
	const sizes = errors.map(Math.abs).sort((a, b) => a - b);
	const half = sizes.length / 2;
	return (sizes[Math.ceil(half) - 1] + sizes[Math.floor(half)]) / 2;
}
