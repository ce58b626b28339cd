import { centsBetween, firstPartialHz, truth } from './recordings';
import { expectNumbersOnly, firstPartialShown, sent, stored } from './listening';
import { expect, student, test } from './support';

/** What the capture device of this project plays, see the configuration. */
const CLIP = 'grand-one-a3c4-m3-v10-l';

test('an interval through the microphone: the beat where a third is counted', async ({ visit }) => {
	const page = await visit(student('edda'), '/string-check');
	const requests = sent(page);
	await page.getByRole('radio', { name: 'Interval' }).check();
	await page.getByLabel('Lower note').selectOption('A3');
	await page.getByLabel('Which interval').selectOption('minor third');
	await page.getByRole('button', { name: 'Listen', exact: true }).click();
	await stored(page);

	for (const [note, alone] of [
		['A3', 'grand-one-a3-v10-l'],
		['C4', 'grand-one-c4-v10-l']
	]) {
		const hz = await firstPartialShown(page, note);
		expect(Math.abs(centsBetween(hz, firstPartialHz(alone)))).toBeLessThan(2.5);
	}
	const judged = page.getByRole('listitem').filter({ hasText: '6th and 5th' });
	const rate = Number.parseFloat((await judged.locator('.rate').textContent()) ?? '');
	expect(Math.abs(rate - truth(CLIP, 'beat_hz', '6:5'))).toBeLessThan(truth(CLIP, 'tol_hz', '6:5'));
	await expect(judged).toContainText(/very likely \d+\.?\d* to \d+/);
	await expect(page.getByRole('heading', { level: 1 })).toContainText('A3–C4');
	expectNumbersOnly(requests);

	await page.getByRole('button', { name: 'Choose something else' }).click();
	await expect(page.getByRole('button', { name: 'Measure the last strike as this' })).toBeVisible();
});
