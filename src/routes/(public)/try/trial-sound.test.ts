import { describe, expect, it } from 'vitest';
import { generateOddOneTrial } from '$lib/drills/odd-one';
import { revealOf } from './trial-sound';

describe('what is shown after the listening trial', () => {
	it.each([1, 2, 3, 11, 99])(
		'seed %i: only the odd tone beats, at the rate that is said',
		(seed) => {
			const trial = generateOddOneTrial(seed);
			const reveal = revealOf(trial);
			reveal.shores.forEach((shore, tone) => {
				const beats = shore.beatsS ?? [];
				if (tone !== trial.answer) {
					expect(beats).toEqual([]);
					return;
				}
				const rate = (beats.length - 1) / (beats[beats.length - 1] - beats[0]);
				expect(Math.abs(rate / reveal.rateHz - 1)).toBeLessThan(0.02);
			});
			expect(reveal.rateHz).toBeGreaterThan(1);
		}
	);
});
