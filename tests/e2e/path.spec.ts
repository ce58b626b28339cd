/** The whole way from a class that is opened to a remark that is read. */
import type { Page } from '@playwright/test';
import { begin, drawFrom, medianSize, onward, playOn, playTrial, trialsOf } from './bench';
import { intervalBeatHz } from '../../src/lib/drills/interval-score';
import { expectSound } from './sound';
import { expect, go, letterTo, origin, ready, signIn, student, TEACHER, test } from './support';

test.describe.configure({ mode: 'serial' });

/** Addresses of their own, so that an application that is open already can be tested again. */
const run = Date.now().toString(36);
const WILMA = {
	name: 'Wilma Harbourne',
	email: `wilma.${run}@harbour.example`,
	password: 'salt-and-low-tide-31'
};
const TOBIN = {
	name: 'Tobin Reedgate',
	email: `tobin.${run}@harbour.example`,
	password: 'rope-over-the-quay-7'
};
const UNISONS = 41;
const INTERVALS = 17;
const CLASS = 'Harbour class';

let classPath = '';
let joinLink = '';

/** The person who was invited takes the place, as far as the first page. */
async function takePlace(page: Page, person: typeof WILMA) {
	await page.getByLabel('Your name').fill(person.name);
	await page.getByLabel('Password').fill(person.password);
	await page.getByRole('button', { name: 'Make the account and take the place' }).click();
	await expect(page).toHaveURL(/\/today$/);
}

test('an instructor signs in and opens a class', async ({ visit, expectFault }) => {
	expectFault(/status of 401/);
	const page = await visit(null);
	await page.getByRole('main').getByRole('link', { name: 'Sign in' }).click();
	await page.getByLabel('E-mail address').fill(TEACHER.email);
	await page.getByLabel('Password').fill('not-this-one-at-all');
	await page.getByRole('button', { name: 'Sign in' }).click();
	await expect(page.getByRole('alert')).toHaveText(
		'This address and password do not belong together.'
	);
	await expect(page.getByLabel('E-mail address')).toHaveValue(TEACHER.email);
	await signIn(page, TEACHER);

	await expect(page).toHaveURL(/\/classes$/);
	await page.getByRole('link', { name: 'Open Evening class, first term' }).click();
	const table = page.getByRole('table', { name: /The students/ });
	await expect(table.getByRole('row')).toHaveCount(7);
	await expect(table.getByRole('row', { name: /Jory Copperthwick/ })).toContainText(/\d/);

	await go(page, '/classes');
	await page.getByLabel('Its name').fill(CLASS);
	await page.getByLabel('First day').fill('2027-02-10');
	await page.getByLabel('Last day').fill('2027-02-03');
	await page.getByRole('button', { name: 'Open the class' }).click();
	await expect(page.getByLabel('Its name'), 'what was typed stays').toHaveValue(CLASS);
	await expect(page.getByRole('alert')).toBeVisible();
	await page.getByLabel('Last day').fill('2027-03-31');
	await page.getByRole('button', { name: 'Open the class' }).click();
	await expect(page.getByRole('heading', { level: 1 })).toHaveText(CLASS);
	classPath = new URL(page.url()).pathname;
	await expect(page.getByText('Nobody is in this class yet.')).toBeVisible();
});

test('she invites by e-mail and hands out the join link', async ({ visit }) => {
	const page = await visit(TEACHER, classPath);
	await page.getByLabel('Address').fill(WILMA.email);
	await page.getByRole('button', { name: 'Send the invitation' }).click();
	await expect(page.getByText(`An invitation is on its way to ${WILMA.email}.`)).toBeVisible();
	await expect(page.getByRole('listitem').filter({ hasText: WILMA.email })).toBeVisible();
	joinLink = await page.getByRole('textbox', { name: 'Join link' }).inputValue();
	expect(joinLink).toContain(`${origin()}/join/`);
});

test('the invited student refuses nothing but bad passwords and lands on Today', async ({
	visit,
	expectFault
}) => {
	expectFault(/status of 400/);
	const letter = await letterTo(WILMA.email, /Your place in the class “Harbour class”/);
	const page = await visit(null, letter.links[0]);
	await expect(page.getByRole('heading', { level: 1 })).toContainText(CLASS);
	await expect(page.getByLabel('E-mail address')).toHaveValue(WILMA.email);
	await page.getByLabel('Your name').fill(WILMA.name);
	const password = page.getByLabel('Password');
	const fault = page.getByRole('alert');
	for (const [bad, sentence] of [
		['short', /at least 12 characters/],
		['password1234', /tried first/],
		['wilmaharbourne', /your own name/]
	] as const) {
		await password.fill(bad);
		await page.getByRole('button', { name: 'Make the account and take the place' }).click();
		await expect(fault).toHaveText(sentence);
		await expect(password).toHaveAccessibleDescription(sentence);
		await expect(page.getByLabel('Your name'), 'what was typed stays').toHaveValue(WILMA.name);
	}
	await takePlace(page, WILMA);
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('You begin at the fork: A4.');
	await expect(page.getByRole('navigation', { name: 'Working order' })).toContainText(
		/A4 to the fork ?, 0 of 4 parts done; you are at do/
	);
	await go(page, '/progress');
	await expect(page.getByText('Your curve begins with the first block')).toBeVisible();

	await go(page, letter.links[0]);
	await expect(page.getByRole('heading', { level: 1 })).toHaveText(
		'This invitation does not work any more'
	);
});

test('another comes in by the join link, and so does somebody who is signed in', async ({
	visit
}) => {
	const stranger = await visit(null, joinLink);
	await stranger.getByLabel('Your e-mail address').fill(TOBIN.email);
	await stranger.getByRole('button', { name: 'Send me the link' }).click();
	await expect(stranger.getByText(/A link to take your place is on its way/)).toBeVisible();
	const letter = await letterTo(TOBIN.email, /Your place/);
	await go(stranger, letter.links[0]);
	await takePlace(stranger, TOBIN);

	const sunniva = student('sunniva');
	const member = await visit(sunniva, joinLink);
	await member.getByRole('button', { name: `Join as ${sunniva.name}` }).click();
	await expect(member).toHaveURL(/\/today$/);

	const teacher = await visit(TEACHER, classPath);
	const table = teacher.getByRole('table', { name: /The students/ });
	for (const name of [WILMA.name, TOBIN.name, sunniva.name]) {
		await expect(table.getByRole('rowheader', { name })).toBeVisible();
	}
});

test('a block of unisons: nothing before, everything after the answer; a reload goes on', async ({
	visit
}) => {
	const specs = trialsOf('unison', UNISONS);
	const page = await visit(WILMA, '/today');
	await page.getByRole('main').getByRole('link', { name: 'Begin', exact: true }).first().click();
	await expect(page).toHaveURL(/\/practice\/unison$/);
	await drawFrom(page, UNISONS);
	await begin(page);

	await expect(page.getByRole('main')).not.toContainText(/\d(\.\d+)? (cents|beats)/);
	await page.keyboard.press('Enter');
	await expect(page.getByText('Strike both before you leave it.')).toBeVisible();
	await page.keyboard.press('Space');
	await expectSound(page);
	const first = await playTrial(page, specs[0], 3);
	const verdict = page.getByRole('heading', { level: 1 });
	await expect(verdict).toHaveText(
		new RegExp(`^Outside: ${first.toFixed(2)} cents sharp, it beats \\d\\.\\d\\d times a second\\.`)
	);
	const main = page.getByRole('main');
	await expect(main).toContainText(`${first.toFixed(2)} cents sharp`);
	await expect(main).toContainText(/Tolerance \d\.\d\d cents either way/);
	await expect(main).toContainText(/Heard at partial \d/);
	await expect(page.getByText('yours, ', { exact: false }).first()).toContainText(
		/beats per second/
	);
	await expect(page.getByText('target, no beat').first()).toBeVisible();
	await page.getByRole('button', { name: 'Hear yours' }).click();
	await expectSound(page);
	await page.getByRole('button', { name: 'Hear the target' }).click();
	await expectSound(page);

	await onward(page).click();
	await playTrial(page, specs[1], 0);
	await expect(verdict).toHaveText(/^Inside: .*, locked, no beat\.$/);
	await onward(page).press('Enter');
	const left = [first, ...(await playOn(page, specs.slice(2, 5), (i) => i / 2))];

	await page.reload();
	await ready(page);
	await expect(page.getByText('5 of 10 trials are kept here')).toBeVisible();
	await page.getByRole('button', { name: 'Go on with it' }).click();
	await expect(page.getByText('Unison, trial 6 of 10')).toBeVisible();
	left.push(...(await playOn(page, specs.slice(5), (i) => (i % 2 ? -0.6 : 0.6))));
	await onward(page).press('Enter');

	const second = Math.round(100 * specs[1].startCents) % 5 ? 0.02 : 0;
	const middle = medianSize([second, ...left]);
	await expect(page.getByText('Stored.')).toBeVisible();
	await expect(page.getByText('By the server’s own reckoning')).toContainText(
		`${middle.toFixed(2)} cents`
	);
	await expect(
		page.getByRole('table', { name: 'The trials of this block' }).getByRole('row')
	).toHaveCount(11);
	await page.getByRole('link', { name: 'Look at every trial' }).click();
	await expect(page.getByRole('region', { name: /Trial \d+ in full/ })).toContainText('Hear yours');
});

test('a block of intervals: help, check, and the right rate on the wrong side', async ({
	visit
}) => {
	const specs = trialsOf('interval', INTERVALS);
	const page = await visit(WILMA, '/practice');
	await page.getByRole('link', { name: 'Intervals' }).click();
	await expect(page).toHaveURL(/\/practice\/interval$/);
	await drawFrom(page, INTERVALS);
	await begin(page);
	await page.keyboard.press('h');
	await expectSound(page);
	await page.keyboard.press('c');
	await expect(page.getByText(/^Check note /)).toBeVisible();
	await expectSound(page);
	await page.keyboard.press('t');
	await playTrial(page, specs[0], 0);
	await expect(page.getByRole('heading', { level: 1 })).toHaveText(
		/^Inside: this .* (wide|narrow)/
	);
	await expect(page.getByText(/^Target \d+\.\d\d (wide|narrow) on this piano/)).toBeVisible();

	await page.keyboard.press('Enter');
	await playTrial(page, specs[1], mirrored(specs[1]));
	await expect(page.getByRole('heading', { level: 1 })).toHaveText(
		/^The right rate on the wrong side: this .* is (wide|narrow), and it belongs (wide|narrow)\.$/
	);
	await page.keyboard.press('Enter');
	await playOn(page, specs.slice(2), (i) => i - 5);
	await onward(page).press('Enter');
	await expect(page.getByText('Stored.')).toBeVisible();
	await expect(page.getByText('right rate, wrong side').first()).toBeVisible();
	await page.getByRole('link', { name: 'Look at every trial' }).click();
	await expect(page.getByRole('main')).toContainText('The coincident partial was played 1 ×.');
	await expect(page.getByRole('main')).toContainText('A check note was played 1 ×.');
});

/** Where the string beats as fast as it should, on the other side of beatless: found by halving. */
function mirrored(spec: ReturnType<typeof trialsOf>[number]): number {
	if (spec.drill !== 'interval') throw new Error('Only intervals have sides.');
	const beat = (cents: number) => intervalBeatHz(spec, cents) / intervalBeatHz(spec, 0);
	let [near, far] = [0, beat(40) < 0 ? 40 : -40];
	for (let i = 0; i < 40; i++) {
		const middle = (near + far) / 2;
		if (beat(middle) > -1) near = middle;
		else far = middle;
	}
	return near;
}

test('Progress shows the curve and the same as a table', async ({ visit }) => {
	const page = await visit(WILMA, '/progress');
	await expect(page.getByRole('img', { name: /^Unison, error left\. Median \d/ })).toBeVisible();
	const unisons = page.getByRole('region', { name: 'Unison, error left', exact: true });
	await unisons.getByText('The same as a table').click();
	await expect(unisons.getByRole('table', { name: /by day/ }).getByRole('row')).toHaveCount(2);
	await unisons.getByText('The blocks, to open').click();
	await expect(unisons.getByRole('link', { name: /Unison block/ })).toHaveCount(1);
	const painted = await page
		.locator('canvas')
		.first()
		.evaluate((canvas) => {
			const { width, height } = canvas as HTMLCanvasElement;
			const pixels = (canvas as HTMLCanvasElement)
				.getContext('2d')
				?.getImageData(0, 0, width, height).data;
			return pixels?.some((value) => value !== 0);
		});
	expect(painted, 'the curve is drawn').toBe(true);
});

test('the instructor finds the student, looks at a block and writes a remark', async ({
	visit
}) => {
	const page = await visit(TEACHER, classPath);
	const row = page.getByRole('row', { name: new RegExp(WILMA.name) });
	await expect(row).toContainText(/0\.\d\d/);
	await row.getByRole('link', { name: WILMA.name }).click();
	await expect(page.getByRole('img', { name: /^Interval, error left/ })).toBeVisible();
	const unisons = page.getByRole('region', { name: 'Unison, error left', exact: true });
	await unisons.getByText('The blocks, to open').click();
	await unisons.getByRole('link', { name: /Unison block/ }).click();
	await expect(page.getByRole('heading', { level: 1 })).toContainText('of 10 inside');
	await page.getByRole('button', { name: /^2\. / }).click();
	const trial = page.getByRole('region', { name: 'Trial 2 in full' });
	await expect(trial).toContainText('locked, no beat');
	await expect(trial.getByRole('button', { name: 'Hear the target' })).toBeVisible();

	await page.getByRole('link', { name: 'Write a remark about it' }).click();
	await page.getByLabel('What you want to say').fill('Leave the second string sooner.\nIt was in.');
	await expect(page.getByLabel('About')).not.toHaveValue('');
	await page.getByRole('button', { name: 'Send the remark' }).click();
	await expect(page.getByText('Sent. It stands on the student’s Today.')).toBeVisible();
});

test('the student reads the remark on Today and puts it away', async ({ visit }) => {
	const page = await visit(WILMA, '/today');
	const remark = page.getByRole('complementary', { name: `Remark from ${TEACHER.name}` });
	await expect(remark).toContainText('Leave the second string sooner.');
	await expect(remark).toContainText('about your unison block');
	await remark.getByRole('button', { name: 'Put it away' }).click();
	await expect(remark).toHaveCount(0);
	await go(page, '/progress');
	await expect(page.getByText('Leave the second string sooner.')).toBeVisible();
});
