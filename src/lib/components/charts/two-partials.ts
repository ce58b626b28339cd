import type { Shore } from './shore';

export interface TwoPartials {
	/** Distance of the two in hertz: beats per second; 0 for none. */
	readonly rateHz: number;
	/** Amplitude of the second relative to the first, 0 to 1. */
	readonly ratio?: number;
	/** Phase between them at the blow, radians. */
	readonly phase?: number;
	/** How fast they die, 1/s. */
	readonly decayPerSecond?: number;
	readonly seconds?: number;
}

/**
 * The shore of two decaying partials of nearly one frequency: |1 + r·exp(i(2πΔt + φ))|·exp(−γt), in
 * dB re the sum at the blow. Two uncoupled sinusoids, the textbook case; what a drill sounds is drawn
 * from its coupled strings instead.
 */
export function shoreOfTwo(partials: TwoPartials): Shore {
	const { rateHz, ratio = 0.8, phase = 0, decayPerSecond = 0.9, seconds = 4 } = partials;
	const count = 800;
	const timesS = Array.from({ length: count + 1 }, (_, k) => (k / count) * seconds);
	const levelDb = timesS.map((t) => {
		const angle = 2 * Math.PI * rateHz * t + phase;
		const size = Math.hypot(1 + ratio * Math.cos(angle), ratio * Math.sin(angle)) / (1 + ratio);
		return 20 * Math.log10(size * Math.exp(-decayPerSecond * t) + 1e-9);
	});
	const beatsS: number[] = [];
	if (rateHz > 0)
		for (let k = 0; ; k++) {
			const t = (Math.PI - phase + 2 * Math.PI * k) / (2 * Math.PI * rateHz);
			if (t > seconds) break;
			if (t > 0) beatsS.push(t);
		}
	return { timesS, levelDb, beatsS };
}
