import { createRandom, normal } from '../../acoustics/random';

/** Noise laid under a rendered tone. */
export interface NoiseSpec {
	/** Level of the tone over the level of the noise, root mean squares of the whole clip, dB. */
	snrDb: number;
	colour: 'white' | 'pink';
	seed: number;
}

/**
 * Pink noise from white by three leaky sums and a direct share: power falls by 3 dB an octave
 * within 0.5 dB over the audible range (weights of P. Kellet's published filter, from memory; the
 * slope is tested).
 */
function pinken(white: Float64Array): Float64Array {
	const pink = new Float64Array(white.length);
	let slow = 0;
	let middle = 0;
	let fast = 0;
	for (let t = 0; t < white.length; t += 1) {
		slow = 0.99765 * slow + 0.099046 * white[t];
		middle = 0.963 * middle + 0.2965164 * white[t];
		fast = 0.57 * fast + 1.0526913 * white[t];
		pink[t] = slow + middle + fast + 0.1848 * white[t];
	}
	return pink;
}

/** Root mean square of a list; 0 for an empty one. */
export function rootMeanSquare(samples: ArrayLike<number>): number {
	let sum = 0;
	for (let t = 0; t < samples.length; t += 1) sum += samples[t] * samples[t];
	return samples.length === 0 ? 0 : Math.sqrt(sum / samples.length);
}

/**
 * Seeded Gaussian noise of `count` samples and root mean square `level`. The same seed gives the
 * same noise on every machine.
 */
export function makeNoise(
	count: number,
	level: number,
	colour: NoiseSpec['colour'],
	seed: number
): Float64Array {
	const random = createRandom(seed);
	const white = Float64Array.from({ length: count }, () => normal(random));
	const noise = colour === 'pink' ? pinken(white) : white;
	const factor = level / (rootMeanSquare(noise) || 1);
	for (let t = 0; t < count; t += 1) noise[t] *= factor;
	return noise;
}
