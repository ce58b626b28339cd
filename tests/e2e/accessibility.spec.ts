import { expectAccessible } from './axe';
import { begin, bench, drawFrom, onward, playOn, trialsOf } from './bench';
import { TOURS } from './pages';
import { expect, go, student, test } from './support';

for (const { role, who, places } of TOURS) {
	test(`every page of a ${role}, by day and in the evening`, async ({ visit, expectFault }) => {
		expectFault(/status of 404/);
		const page = await visit(who);
		for (const { name, path } of await places(page)) {
			await go(page, path);
			await expect(page.getByRole('heading', { level: 1 })).toHaveCount(1);
			await expectAccessible(page, `${role}-${name}`);
		}
	});
}

test('a listening trial that was answered', async ({ visit }) => {
	const page = await visit(null, '/try');
	await page.getByRole('button', { name: 'Listen' }).click();
	await page.getByRole('button', { name: '1 The first' }).click();
	await expect(page.getByRole('button', { name: 'Another three' })).toBeVisible();
	await expectAccessible(page, 'stranger-try-answered');
});

test('the bench, the reveal, the end of a block, and a block under way', async ({ visit }) => {
	const specs = trialsOf('interval', 5);
	const page = await visit(student('mirabel'), '/practice/interval');
	await drawFrom(page, 5);
	await begin(page);
	await page.getByRole('button', { name: 'Hear the check' }).click();
	await expectAccessible(page, 'student-bench');
	await bench(page).focus();
	await playOn(page, specs.slice(0, 1), () => 0.4);
	await expectAccessible(page, 'student-reveal');
	await page.reload();
	await expect(page.getByRole('button', { name: 'Go on with it' })).toBeEnabled();
	await expectAccessible(page, 'student-under-way');
	await page.getByRole('button', { name: 'Go on with it' }).click();
	await playOn(page, specs.slice(1), (i) => i);
	await onward(page).press('Enter');
	await expect(page.getByText('Stored.')).toBeVisible();
	await expectAccessible(page, 'student-summary');
});
