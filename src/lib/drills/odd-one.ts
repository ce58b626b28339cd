import { createRandom, integer, pick } from '../acoustics/random';
import { DRILL_PIANOS } from './catalogue';
import { drawHundredths, drawVelocityPercent } from './draw';
import type { OddOneTrialSpec } from './types';

/**
 * A listening trial: three soft tones of one note, one of which beats. The same seed gives the same
 * trial. A visitor's trial, not stored: the spread is easy to hear (1.6 to 3 beats a second at the
 * first partial).
 */
export function generateOddOneTrial(seed: number): OddOneTrialSpec {
	const random = createRandom(seed);
	const midi = integer(random, 57, 69);
	const f1Hz = 440 * 2 ** ((midi - 69) / 12);
	const rateHz = drawHundredths(random, 1.6, 3);
	return {
		drill: 'odd-one',
		piano: pick(random, DRILL_PIANOS),
		midi,
		velocityPercent: Math.min(60, drawVelocityPercent(random)),
		spreadCents: Math.round(((1200 / Math.LN2) * 100 * rateHz) / f1Hz) / 100,
		answer: pick(random, [0, 1, 2] as const)
	};
}

/** The offsets in cents of the two strings of tone `tone` (0, 1, 2); a still tone has them equal. */
export function oddOneStringsCents(
	trial: OddOneTrialSpec,
	tone: 0 | 1 | 2
): readonly [number, number] {
	return tone === trial.answer ? [0, trial.spreadCents] : [0, 0];
}
