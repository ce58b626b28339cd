import type { APIRequestContext, APIResponse, Page } from '@playwright/test';
import { randomUUID } from 'node:crypto';
import { playedAttempt } from '../support/played';
import {
	ADMIN,
	COLLEAGUE,
	expect,
	go,
	origin,
	signIn,
	student,
	TEACHER,
	test,
	type Person
} from './support';

const asPage = { maxRedirects: 0, headers: { accept: 'text/html' } };

/** Where the demo class and one of its students are, as their instructor finds them. */
async function placesOf(page: Page, name: string): Promise<{ klass: string; pupil: string }> {
	await page.getByRole('link', { name: 'Open Evening class, first term' }).click();
	const link = page.getByRole('link', { name });
	const pupil = (await link.getAttribute('href')) ?? '';
	return { klass: pupil.split('/students/')[0], pupil };
}

async function ownAttempts(person: APIRequestContext): Promise<string[]> {
	const answer = await person.get('/api/attempts');
	return ((await answer.json()) as { attempts: { id: string }[] }).attempts.map(({ id }) => id);
}

const send = (person: APIRequestContext, attempt: unknown, headers: Record<string, string> = {}) =>
	person.post('/api/attempts', { data: attempt, headers });

async function expectProblem(answer: APIResponse, status: number) {
	expect(answer.status(), await answer.text()).toBe(status);
	expect(answer.headers()['content-type']).toContain('application/problem+json');
	expect(await answer.json()).toMatchObject({ status, title: expect.any(String) });
}

test('pages of another role are closed', async ({ ask, visit, expectFault }) => {
	expectFault(/status of 403/);
	const closed: [Person | null, number, string[]][] = [
		[
			null,
			303,
			['/today', '/practice/unison', '/progress', '/account', '/classes', '/admin/users']
		],
		[student('mirabel'), 403, ['/classes', '/admin/users', '/admin/mail', '/admin/audit']],
		[TEACHER, 403, ['/admin/users', '/admin/mail', '/admin/audit']],
		[ADMIN, 403, ['/today', '/practice/unison', '/string-check', '/progress', '/classes']]
	];
	for (const [who, status, paths] of closed) {
		const person = await ask(who);
		for (const path of paths) {
			const answer = await person.get(path, asPage);
			expect(answer.status(), `${who?.email ?? 'a stranger'} at ${path}`).toBe(status);
			if (status === 303) expect(answer.headers().location).toMatch(/^\/sign-in\?redirectTo=/);
		}
	}
	await expectProblem(await (await ask(ADMIN)).get('/api/attempts'), 403);
	await expectProblem(await (await ask(null)).get('/api/attempts'), 401);
	await expectProblem(await send(await ask(null), playedAttempt()), 401);
	const page = await visit(student('mirabel'), '/classes');
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('This page is not yours.');
});

test("another class, another class's student and another student's attempt are not there", async ({
	ask,
	visit
}) => {
	const jory = student('jory');
	const [attempt] = await ownAttempts(await ask(jory));
	const teacher = await visit(TEACHER, '/classes');
	const { klass, pupil } = await placesOf(teacher, jory.name);
	expect((await teacher.request.get(`${pupil}/attempts/${attempt}`, asPage)).status()).toBe(200);

	const colleague = await ask(COLLEAGUE);
	for (const path of [klass, pupil, `${pupil}/attempts/${attempt}`]) {
		expect((await colleague.get(path, asPage)).status(), path).toBe(404);
	}
	const other = await ask(student('mirabel'));
	for (const id of [attempt, randomUUID(), 'not-an-id']) {
		const answer = await other.get(`/practice/attempts/${id}`, asPage);
		expect(answer.status(), id).toBe(404);
	}
	const remark = await colleague.post(`${pupil}?/remark`, {
		form: { text: 'Not mine to say.', attemptId: '' },
		headers: { origin: origin(), accept: 'application/json' }
	});
	expect(await remark.text()).not.toContain('Sent.');
	await go(teacher, pupil);
	await expect(teacher.getByText('Not mine to say.')).toHaveCount(0);
});

test('an attempt sent twice is stored once; what is changed under its id is refused', async ({
	ask
}) => {
	const mirabel = await ask(student('mirabel'));
	const attempt = playedAttempt({ finishedAt: new Date() });
	const first = await send(mirabel, attempt);
	expect(first.status()).toBe(201);
	const second = await send(mirabel, attempt);
	expect(second.status()).toBe(200);
	expect(await second.json()).toEqual(await first.json());
	const other = playedAttempt({ id: attempt.id, finishedAt: new Date(), leftCents: () => 0 });
	await expectProblem(await send(mirabel, other), 409);
	expect((await ownAttempts(mirabel)).filter((id) => id === attempt.id)).toHaveLength(1);
	const thief = await ask(student('ansel'));
	await expectProblem(await send(thief, attempt), 404);
	const owner = { 'x-student-id': randomUUID() };
	await expectProblem(await send(mirabel, playedAttempt(), owner), 401);
});

test('what cannot have happened is refused; a score of the own making is replaced and noted', async ({
	ask,
	visit
}) => {
	const mirabel = await ask(student('mirabel'));
	const honest = playedAttempt({ finishedAt: new Date() });
	const [trial, ...rest] = honest.trials;
	const easier = honest.stimulus.trials.map((spec) => ({ ...spec, startCents: 0 }));
	const tampered: unknown[] = [
		{ ...honest, trials: [{ ...trial, committedCents: 0.013 }, ...rest] },
		{ ...honest, trials: [{ ...trial, committedCents: trial.committedCents + 1 }, ...rest] },
		{ ...honest, trials: [{ ...trial, trace: [] }, ...rest] },
		{ ...honest, trials: rest },
		{ ...honest, stimulus: { ...honest.stimulus, trials: easier } },
		{ ...honest, seed: honest.seed + 1 },
		{ ...honest, engineVersion: 999 },
		{ ...honest, studentId: randomUUID() },
		{ ...honest, finishedAt: honest.startedAt },
		null,
		[]
	];
	for (const body of tampered) {
		await expectProblem(await send(mirabel, { ...(body as object), id: randomUUID() }), 422);
	}
	const broken = { 'content-type': 'application/json' };
	await expectProblem(await send(mirabel, Buffer.from('{"id":'), broken), 400);
	await expectProblem(
		await send(mirabel, 'id=1', { 'content-type': 'text/plain', origin: origin() }),
		415
	);

	const boast = { ...playedAttempt({ finishedAt: new Date() }), clientScore: 0 };
	const answer = await send(mirabel, boast);
	expect(answer.status()).toBe(201);
	const stored = (await answer.json()) as { score: number; scoreFlagged: boolean };
	expect(stored.scoreFlagged).toBe(true);
	expect(stored.score).toBeCloseTo(honest.clientScore, 9);
	const admin = await visit(ADMIN, '/admin/audit');
	await expect(admin.getByRole('row', { name: /attempt: score differs/ }).first()).toContainText(
		student('mirabel').name
	);
});

test('an attempt too large to be one is refused unread', async ({ ask }) => {
	const mirabel = await ask(student('mirabel'));
	const padded = { ...playedAttempt(), padding: 'x'.repeat(1_600_000) };
	expect((await send(mirabel, padded)).status()).toBe(413);
});

test('requests that another site causes are refused', async ({ visit, expectFault }) => {
	expectFault(/status of 403|favicon/);
	const page = await visit(student('ansel'));
	const elsewhere = { origin: 'https://elsewhere.example' };
	await expectProblem(await send(page.request, playedAttempt(), elsewhere), 403);
	const site = { 'sec-fetch-site': 'cross-site' };
	await expectProblem(await send(page.request, playedAttempt(), site), 403);
	const form = { form: { name: 'Somebody Else' }, headers: elsewhere };
	expect((await page.request.post('/account?/name', form)).status()).toBe(403);

	await page.goto('about:blank');
	await page.setContent(
		`<form method="post" action="${origin()}/account?/everywhere"><button>Win</button></form>`
	);
	const answer = page.waitForResponse(/account/);
	await page.getByRole('button').click();
	expect((await answer).status()).toBe(403);
	await go(page, '/account');
	await expect(page.getByLabel('How others see you')).toHaveValue(student('ansel').name);
});

test('signing out everywhere ends every session, copied cookies too', async ({
	visit,
	playwright
}) => {
	const corin = student('corin');
	const [here, there] = [await visit(null, '/sign-in'), await visit(null, '/sign-in')];
	await signIn(here, corin);
	await signIn(there, corin);
	const copied = await playwright.request.newContext({
		baseURL: origin(),
		storageState: await there.context().storageState()
	});
	expect((await copied.get('/api/attempts')).status()).toBe(200);
	await go(here, '/account');
	await here.getByRole('button', { name: 'Sign out everywhere' }).click();
	await expect(here).toHaveURL(/\/sign-in$/);
	expect((await copied.get('/api/attempts')).status()).toBe(401);
	await go(there, '/today');
	await expect(there).toHaveURL(/\/sign-in\?redirectTo=%2Ftoday$/);
	await copied.dispose();
});

test('every page carries its policies, with a nonce of its own', async ({ visit, expectFault }) => {
	expectFault(/Content Security Policy/);
	const page = await visit(student('ansel'));
	const nonces: string[] = [];
	for (const path of ['/', '/today', '/practice/unison', '/sign-in']) {
		const headers = (await page.request.get(path)).headers();
		const policy = headers['content-security-policy'];
		const script = policy.split(';').find((part) => part.trim().startsWith('script-src')) ?? '';
		expect(script, path).not.toContain('unsafe-inline');
		nonces.push(/'nonce-([^']+)'/.exec(script)?.[1] ?? '');
		expect(policy).toContain("frame-ancestors 'none'");
		expect(policy).toContain("object-src 'none'");
		expect(headers['permissions-policy']).toContain('microphone=(self)');
		expect(headers['x-content-type-options']).toBe('nosniff');
		expect(headers['x-frame-options']).toBe('DENY');
	}
	expect(nonces.every((nonce) => nonce.length > 15)).toBe(true);
	expect(new Set(nonces).size).toBe(nonces.length);
	const token = await page.request.get('/invitation/none');
	expect(token.headers()['referrer-policy']).toBe('same-origin');
	const cookies = await page.context().cookies();
	const session = cookies.filter(({ name }) => name.includes('session'));
	expect(session.length).toBeGreaterThan(0);
	for (const { httpOnly, sameSite } of session) {
		expect({ httpOnly, sameSite }).toEqual({ httpOnly: true, sameSite: 'Lax' });
	}
	await page.evaluate(() => {
		const script = document.createElement('script');
		script.textContent = 'window.injected = true';
		document.head.append(script);
	});
	expect(await page.evaluate(() => 'injected' in window)).toBe(false);
});
