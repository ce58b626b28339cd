import { normal, type Random } from '../../acoustics/random';

/** What an ear can do on one day. */
export interface Hearing {
	/** Rate at which a slow beat is noticed half of the time, b/s. */
	readonly thresholdHz: number;
	/** Spread of judging a rate, as a share of it (a Weber fraction). */
	readonly weber: number;
}

/**
 * The rate an ear makes of a real one: 0 when no beat is noticed. Noticing follows a Weibull curve
 * over the rate (half at the threshold, slope 2); the rate is judged with log-normal noise. A model
 * of a listener for simulations, not a finding.
 */
export function heardRateHz(rateHz: number, hearing: Hearing, random: Random): number {
	if (rateHz <= 0) return 0;
	if (hearing.thresholdHz > 0) {
		const noticed = 1 - Math.exp(-Math.LN2 * (rateHz / hearing.thresholdHz) ** 2);
		if (random() > noticed) return 0;
	}
	return rateHz * Math.exp(hearing.weber * normal(random));
}
