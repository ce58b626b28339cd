import { describe, expect, it } from 'vitest';
import { isCrossSite } from './origin';

const HERE = 'https://tune.example';
const from = (headers: Record<string, string>) => isCrossSite(new Headers(headers), HERE);

describe('requests that another site caused', () => {
	it('are known by their origin', () => {
		expect(from({ origin: 'https://elsewhere.example' })).toBe(true);
		expect(from({ origin: 'http://tune.example' })).toBe(true);
		expect(from({ origin: 'null' })).toBe(true);
		expect(from({ origin: HERE })).toBe(false);
	});

	it('are known by what the browser says of the site', () => {
		expect(from({ 'sec-fetch-site': 'cross-site' })).toBe(true);
		expect(from({ 'sec-fetch-site': 'same-site' })).toBe(true);
		expect(from({ 'sec-fetch-site': 'same-origin', origin: HERE })).toBe(false);
		expect(from({ 'sec-fetch-site': 'cross-site', origin: HERE })).toBe(true);
	});

	it('are not programs, which say neither', () => {
		expect(from({})).toBe(false);
	});
});
