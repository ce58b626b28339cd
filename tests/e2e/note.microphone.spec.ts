import { centsBetween, firstPartialHz } from './recordings';
import { expectNumbersOnly, firstPartialShown, sent, stored } from './listening';
import { expect, go, student, TEACHER, test } from './support';

/** What the capture device of this project plays, see the configuration. */
const CLIP = 'grand-one-a3-v10-l';

test('a string through the microphone: its pitch, stored as numbers, seen by both', async ({
	visit
}) => {
	const edda = student('edda');
	const page = await visit(edda, '/string-check');
	const requests = sent(page);
	await page.getByRole('radio', { name: 'One string' }).check();
	await page.getByLabel('Note', { exact: true }).selectOption('A3');
	await page.getByRole('button', { name: 'Listen', exact: true }).click();
	await stored(page);

	await expect(page.getByRole('heading', { level: 1 })).toHaveText(
		/^A3 sounds at 2(19|20)\.\d\d Hz/
	);
	const hz = await firstPartialShown(page, 'A3');
	expect(Math.abs(centsBetween(hz, firstPartialHz(CLIP)))).toBeLessThan(2.5);
	await expect(page.getByText('Nothing in the browser touched it.')).toBeVisible();
	await expect(page.getByText(/^Inharmonicity 0\.000/)).toBeVisible();
	await expect(page.getByRole('heading', { name: 'Partial by partial' })).toBeVisible();
	expectNumbersOnly(requests);

	await go(page, '/progress');
	const checks = page.getByRole('table', { name: /String checks/ });
	await expect(checks.getByRole('row', { name: /A3, note/ }).first()).toContainText(
		`${hz.toFixed(2)} Hz`
	);

	const teacher = await visit(TEACHER, '/classes');
	await teacher.getByRole('link', { name: 'Open Evening class, first term' }).click();
	const row = teacher.getByRole('row', { name: new RegExp(edda.name) });
	await expect(row.getByRole('cell').last()).toContainText('A3');
	await row.getByRole('link', { name: edda.name }).click();
	await expect(
		teacher
			.getByRole('table', { name: /String checks/ })
			.getByRole('row', { name: /A3, note/ })
			.first()
	).toContainText('microphone');
});

test('the same strike again as another note is not believed, and not kept', async ({ visit }) => {
	const page = await visit(student('edda'), '/string-check');
	const requests = sent(page);
	await page.getByRole('radio', { name: 'One string' }).check();
	await page.getByLabel('Note', { exact: true }).selectOption('E4');
	await page.getByRole('button', { name: 'Listen', exact: true }).click();
	await expect(page.getByRole('button', { name: 'Strike again' })).toBeVisible({ timeout: 60_000 });
	await expect(page.getByRole('heading', { level: 1 })).not.toContainText('E4 sounds at');
	expect(requests, 'nothing is sent').toEqual([]);
});
