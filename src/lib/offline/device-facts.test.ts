import { describe, expect, it } from 'vitest';
import { deviceFacts, userAgentClass } from './device-facts';

describe('device facts', () => {
	it('keeps the kind of machine and the family of the browser only', () => {
		const chromium =
			'Mozilla/5.0 (X11; Linux x86_64) AppleWebKit/537.36 Chrome/140.0 Safari/537.36';
		expect(userAgentClass(chromium, false)).toBe('desktop-chromium');
		expect(userAgentClass('Mozilla/5.0 (X11; rv:140.0) Gecko/20100101 Firefox/140.0', false)).toBe(
			'desktop-gecko'
		);
		const phone = 'Mozilla/5.0 (iPhone; CPU) AppleWebKit/605.1.15 Version/18.0 Mobile Safari/604.1';
		expect(userAgentClass(phone, true)).toBe('touch-webkit');
		expect(userAgentClass('', true)).toBe('touch-other');
	});

	it('says nothing about a latency that the browser does not tell', () => {
		const base = { sampleRateHz: 48_000, userAgent: '', coarsePointer: false };
		expect(deviceFacts({ ...base, outputLatencySeconds: 0.012 }).outputLatencySeconds).toBe(0.012);
		for (const latency of [undefined, Number.NaN, -1, 99]) {
			expect(
				deviceFacts({ ...base, outputLatencySeconds: latency }).outputLatencySeconds
			).toBeNull();
		}
	});
});
