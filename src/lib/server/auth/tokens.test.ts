import { beforeEach, describe, expect, it } from 'vitest';
import { resetEnv } from '../env';
import { classOfJoinToken, hashOfToken, joinToken, newToken, provesJoin } from './tokens';

const CLASS = '7d1c4a52-0b6e-4c0e-9a51-0e3f6f2a8c01';
const OTHER = '7d1c4a52-0b6e-4c0e-9a51-0e3f6f2a8c02';

function useSecret(secret: string): void {
	process.env.AUTH_SECRET = secret;
	process.env.DATABASE_URL ??= 'postgres://localhost/none';
	process.env.ORIGIN ??= 'http://localhost:3000';
	process.env.SMTP_URL ??= 'smtp://127.0.0.1:1';
	resetEnv();
}

beforeEach(() => useSecret('a secret for the tests of tokens, long enough'));

describe('tokens of links in mails', () => {
	it('are stored as a hash that the token gives again', () => {
		const { token, hash } = newToken();
		expect(hashOfToken(token)).toBe(hash);
		expect(hash).toMatch(/^[0-9a-f]{64}$/);
		expect(hash).not.toContain(token);
		expect(newToken().token).not.toBe(token);
	});

	it.each(['', 'short', `${'a'.repeat(42)}!`, 'a'.repeat(44)])('%j cannot be one', (token) => {
		expect(hashOfToken(token)).toBeNull();
	});
});

describe('join tokens', () => {
	it('prove one version of one class', () => {
		const token = joinToken(CLASS, 3);
		expect(classOfJoinToken(token)).toBe(CLASS);
		expect(provesJoin(token, CLASS, 3)).toBe(true);
		expect(provesJoin(token, CLASS, 4)).toBe(false);
		expect(provesJoin(token, OTHER, 3)).toBe(false);
	});

	it('cannot be made for another class from a known one', () => {
		const [, proof] = joinToken(CLASS, 1).split('.');
		const [other] = joinToken(OTHER, 1).split('.');
		expect(provesJoin(`${other}.${proof}`, OTHER, 1)).toBe(false);
	});

	it('are worth nothing under another secret', () => {
		const token = joinToken(CLASS, 1);
		useSecret('another secret for the tests of tokens, long too');
		expect(provesJoin(token, CLASS, 1)).toBe(false);
	});

	it.each(['', 'x.y', '../../etc', `${'a'.repeat(22)}`, `${'a'.repeat(22)}.${'!'.repeat(22)}`])(
		'%j is none',
		(token) => {
			expect(classOfJoinToken(token)).toBeNull();
			expect(provesJoin(token, CLASS, 1)).toBe(false);
		}
	);
});
