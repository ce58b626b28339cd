import type { AttemptSubmission } from '../../lib/drills/types';

/** A signed-in visitor over HTTP: keeps cookies, follows no redirect. */
export class Visitor {
	private readonly cookies = new Map<string, string>();

	constructor(readonly origin: string) {}

	/** One request; `body` is sent as a form, `json` as JSON. */
	async ask(path: string, body?: Record<string, string>, json?: unknown): Promise<Response> {
		const response = await fetch(this.origin + path, {
			method: body || json !== undefined ? 'POST' : 'GET',
			redirect: 'manual',
			headers: {
				origin: this.origin,
				cookie: [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; '),
				...(json !== undefined ? { 'content-type': 'application/json' } : {})
			},
			body: json !== undefined ? JSON.stringify(json) : body ? new URLSearchParams(body) : undefined
		});
		for (const line of response.headers.getSetCookie()) {
			const [pair] = line.split(';');
			const at = pair.indexOf('=');
			this.cookies.set(pair.slice(0, at), pair.slice(at + 1));
		}
		return response;
	}

	/** @throws when the sign-in is refused. */
	async signIn(email: string, password: string): Promise<void> {
		await this.ask('/sign-in');
		await this.ask('/sign-in', { email, password, redirectTo: '/progress' });
		const progress = await this.ask('/progress');
		if (progress.status !== 200) throw new Error(`The sign-in of ${email} was refused.`);
		await progress.text();
	}

	/** @throws when the attempt is not stored. */
	async send(attempt: AttemptSubmission): Promise<void> {
		const answer = await this.ask('/api/attempts', undefined, attempt);
		const text = await answer.text();
		if (answer.status !== 201) throw new Error(`An attempt was not stored: ${text}`);
	}
}
