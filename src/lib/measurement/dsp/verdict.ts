import type { Interval95, PairTier, PairVerdict } from '../types';

/** What one band says. */
export interface BandVerdict {
	verdict: PairVerdict;
	tier: PairTier | null;
	beatRateHz: number | null;
	ci95Hz: Interval95 | null;
	reason: string | null;
}

export function notMeasurable(reason: string): BandVerdict {
	return { verdict: 'not-measurable', tier: null, beatRateHz: null, ci95Hz: null, reason };
}

/** No beat within the time heard; the limit is named. */
export function still(limitHz: number): BandVerdict {
	const reason = `No beat faster than ${limitHz.toFixed(2)} per second in the time heard.`;
	return { verdict: 'still', tier: null, beatRateHz: null, ci95Hz: null, reason };
}

/** `firm` within max(5 %, 0.1 b/s), `about` within max(10 %, 0.15 b/s), null beyond. */
export function tierOf(rateHz: number, halfWidthHz: number): PairTier | null {
	if (halfWidthHz <= Math.max(0.05 * rateHz, 0.1)) return 'firm';
	if (halfWidthHz <= Math.max(0.1 * rateHz, 0.15)) return 'about';
	return null;
}

/** A rate with its interval, if that is narrow enough to be worth saying. */
export function beating(
	rateHz: number,
	halfWidthHz: number,
	remark: string | null,
	tooWide: string
): BandVerdict {
	const tier = tierOf(rateHz, halfWidthHz);
	if (!tier) return notMeasurable(tooWide);
	return {
		verdict: 'beating',
		tier,
		beatRateHz: rateHz,
		ci95Hz: [Math.max(0, rateHz - halfWidthHz), rateHz + halfWidthHz],
		reason: remark
	};
}
