import { ADMIN, expect, go, letterTo, ready, signIn, test } from './support';

test.describe.configure({ mode: 'serial' });

const run = Date.now().toString(36);
const ODA = {
	name: `Oda Fennwick ${run}`,
	email: `oda.${run}@harbour.example`,
	password: 'four-bricks-and-a-plank-2'
};

test('an admin makes an account; its owner chooses a password by the letter', async ({
	visit,
	expectFault
}) => {
	expectFault(/status of 4(00|09)/);
	const page = await visit(ADMIN, '/admin/users');
	await page.getByLabel('Name', { exact: true }).fill(ODA.name);
	await page.getByLabel('E-mail address').fill(ADMIN.email);
	await page.getByRole('button', { name: 'Make the account' }).click();
	await expect(page.getByRole('alert'), 'an address that is taken').toBeVisible();
	await expect(page.getByLabel('Name', { exact: true })).toHaveValue(ODA.name);
	await page.getByLabel('E-mail address').fill(ODA.email);
	await page.getByRole('button', { name: 'Make the account' }).click();
	await expect(page.getByText('The account is made.')).toBeVisible();
	const row = page.getByRole('row', { name: new RegExp(ODA.name) });
	await expect(row).toContainText('invited, no password yet');

	const letter = await letterTo(ODA.email, /Your Ebbtone account/);
	const owner = await visit(null, letter.links[0]);
	await owner.getByLabel('New password').fill(ODA.password);
	await owner.getByRole('button', { name: 'Keep this password' }).click();
	await expect(owner).toHaveURL(/\/today$/);
	await go(owner, letter.links[0]);
	await expect(owner.getByRole('heading', { level: 1 })).toHaveText(
		'This link does not work any more'
	);
});

test('a forgotten password is chosen anew by a letter, which ends every session', async ({
	visit
}) => {
	const signedIn = await visit(ODA, '/today');
	const page = await visit(null, '/forgot');
	const answers: string[] = [];
	for (const address of [`nobody.${run}@harbour.example`, ODA.email]) {
		await page.getByLabel('E-mail address of your account').fill(address);
		await page.getByRole('button', { name: 'Send the link' }).click();
		const note = page.getByRole('status').filter({ hasText: address });
		answers.push(((await note.textContent()) ?? '').replace(address, ''));
	}
	expect(answers[0], 'nobody learns who has an account').toBe(answers[1]);
	const letter = await letterTo(ODA.email, /Choose a new password/);
	await go(page, letter.links[0]);
	ODA.password = 'the-tide-comes-back-again-6';
	await page.getByLabel('New password').fill(ODA.password);
	await page.getByRole('button', { name: 'Keep this password' }).click();
	await expect(page).toHaveURL(/\/today$/);
	await go(signedIn, '/progress');
	await expect(signedIn, 'the older session is over').toHaveURL(/\/sign-in/);
	await signIn(signedIn, ODA);
	await expect(signedIn).toHaveURL(/\/progress$/);
	await go(page, letter.links[0]);
	await expect(page.getByRole('heading', { level: 1 })).toHaveText(
		'This link does not work any more'
	);
});

test('a role changed and an account closed take effect at once', async ({ visit, expectFault }) => {
	expectFault(/status of 401/);
	const owner = await visit(ODA, '/today');
	const page = await visit(ADMIN, `/admin/users?search=${run}`);
	const row = page.getByRole('row', { name: new RegExp(ODA.name) });
	await row.getByLabel(`Role of ${ODA.name}`).selectOption('instructor');
	await row.getByRole('button', { name: `Make ${ODA.name} instructor` }).click();
	await expect(page.getByText('The role is instructor now.')).toBeVisible();
	await go(owner, '/classes');
	await expect(owner.getByRole('heading', { level: 1 })).toHaveText('You teach no class yet.');

	await row.getByRole('button', { name: `Close the account of ${ODA.name}` }).click();
	await expect(row).toContainText('closed');
	await owner.getByRole('link', { name: 'Today' }).click();
	await expect(owner).toHaveURL(/\/sign-in/);
	await ready(owner);
	await owner.getByLabel('E-mail address').fill(ODA.email);
	await owner.getByLabel('Password').fill(ODA.password);
	await owner.getByRole('button', { name: 'Sign in' }).click();
	await expect(owner.getByRole('alert')).toBeVisible();

	await row.getByRole('button', { name: `Open the account of ${ODA.name} again` }).click();
	await expect(row).not.toContainText('closed');
	await signIn(owner, ODA);
	await expect(owner).toHaveURL(/\/classes|\/today/);
});

test('the last admin stays', async ({ visit, expectFault }) => {
	expectFault(/status of 4(00|03|09|22)/);
	const page = await visit(ADMIN, '/admin/users?search=piers');
	const row = page.getByRole('row', { name: new RegExp(ADMIN.name) });
	await row.getByLabel(`Role of ${ADMIN.name}`).selectOption('student');
	await row.getByRole('button', { name: `Make ${ADMIN.name} student` }).click();
	await expect(page.getByRole('alert')).toContainText('This is the last active admin.');
	await row.getByRole('button', { name: `Close the account of ${ADMIN.name}` }).click();
	await expect(page.getByRole('alert')).toContainText(/last active admin|your own/);
	await go(page, '/admin/users?search=piers');
	await expect(row.getByLabel(`Role of ${ADMIN.name}`)).toHaveValue('admin');
	await expect(row.getByRole('button', { name: /^Close/ })).toBeVisible();
});

test('the mail that was sent and what was done can be read', async ({ visit }) => {
	const page = await visit(ADMIN, '/admin/mail');
	// She was also sent letters about her password: this is the one about the new account.
	const subject = page.getByText('Your Ebbtone account', { exact: true });
	const letter = page.getByRole('listitem').filter({ hasText: ODA.email }).filter({ has: subject });
	await letter.getByText('Your Ebbtone account', { exact: true }).click();
	await expect(letter.getByRole('link', { name: /\/reset\// })).toBeVisible();
	await expect(
		page
			.getByRole('table', { name: 'Mails, newest first' })
			.getByRole('row', { name: new RegExp(ODA.email) })
			.filter({ hasText: /Your Ebbtone account/ })
	).toContainText('sent');

	await page.getByRole('link', { name: 'Audit' }).click();
	const trail = page.getByRole('table', { name: /Audit trail/ });
	for (const deed of [/role/, /deactivated|closed/, /created|made/]) {
		await expect(
			trail.getByRole('row', { name: deed }).filter({ hasText: run }).first()
		).toBeVisible();
	}
});
