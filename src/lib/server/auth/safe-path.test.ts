import { describe, expect, it } from 'vitest';
import { safePath } from './safe-path';

describe('where to go after signing in', () => {
	it.each(['/today', '/practice/unison?seed=3', '/classes/7d1c4a52'])('keeps %s', (path) => {
		expect(safePath(path)).toBe(path);
	});

	it.each([
		'//elsewhere.example/x',
		'/\\elsewhere.example',
		'/\t/elsewhere.example',
		'/..//elsewhere.example',
		'/.//elsewhere.example',
		'/%2e%2e//elsewhere.example',
		'/today/../..//elsewhere.example',
		'/./\\elsewhere.example',
		'https://elsewhere.example',
		'javascript:alert(1)',
		'today',
		'',
		`/${'x'.repeat(600)}`,
		null,
		undefined,
		7
	])('refuses %j', (path) => {
		expect(safePath(path)).toBeNull();
	});
});
