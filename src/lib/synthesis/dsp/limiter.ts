/** Below this the limiter is a wire: nothing is added to the sound. */
const KNEE = 0.8;
const CEILING = 0.999;
/** Smaller than this is written as zero: single-precision denormals cost time on some machines. */
const FLOOR = 1e-20;

/**
 * Soft limiter for one sample: linear up to 0.8, then bending smoothly towards 0.999, which it
 * never passes. NaN becomes 0.
 */
export function limit(sample: number): number {
	const size = sample < 0 ? -sample : sample;
	if (!(size > FLOOR)) return 0;
	if (size <= KNEE) return sample;
	const room = CEILING - KNEE;
	const bent = KNEE + room * Math.tanh((size - KNEE) / room);
	return sample < 0 ? -bent : bent;
}
