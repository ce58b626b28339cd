/**
 * Signals for the tests of this room: damped sinusoids and seeded noise. Not used by the product.
 */

/** Standard normal numbers from a seed (mulberry32 and the polar form of Box and Muller). */
export function createNoise(seed: number): () => number {
	const uniform = createUniform(seed);
	return () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
}

/** Uniform numbers in [0, 1) from a seed (mulberry32). */
export function createUniform(seed: number): () => number {
	let state = seed >>> 0;
	return () => {
		state = (state + 0x6d2b79f5) >>> 0;
		let t = state;
		t = Math.imul(t ^ (t >>> 15), t | 1);
		t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
		return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
	};
}

export interface DampedSine {
	hz: number;
	amplitude: number;
	decayPerSecond: number;
	phase: number;
	/** Starts this much higher and glides down as exp(-t/glideSeconds). */
	glideHz?: number;
	glideSeconds?: number;
}

/** Adds damped sinusoids that begin at `atSeconds`. */
export function addSines(
	samples: Float32Array,
	sampleRateHz: number,
	sines: readonly DampedSine[],
	atSeconds = 0
): void {
	const start = Math.round(atSeconds * sampleRateHz);
	for (const sine of sines) {
		const omega = (2 * Math.PI * sine.hz) / sampleRateHz;
		const gamma = sine.decayPerSecond / sampleRateHz;
		const tau = (sine.glideSeconds ?? 0.35) * sampleRateHz;
		const glide = (2 * Math.PI * (sine.glideHz ?? 0) * tau) / sampleRateHz;
		for (let i = start; i < samples.length; i++) {
			const n = i - start;
			const turn = glide === 0 ? 0 : -glide * Math.expm1(-n / tau);
			samples[i] += sine.amplitude * Math.exp(-gamma * n) * Math.cos(omega * n + turn + sine.phase);
		}
	}
}

export interface ToneSpec {
	sampleRateHz: number;
	seconds: number;
	/** One entry per string: its f_1 and B. */
	strings: readonly { f1Hz: number; inharmonicity: number; level?: number }[];
	partials?: number;
	decayPerSecond?: number;
	/** Every partial starts this many cents higher. */
	glideCents?: number;
	glideSeconds?: number;
	/** Seed of phases and levels. */
	seed: number;
	/** White noise, dB below the tone's first half second; none when left out. */
	snrDb?: number;
	atSeconds?: number;
}

/** A tone of stiff strings without coupling, levelled to a peak of about 0.5. */
export function stiffTone(spec: ToneSpec): Float32Array {
	const { sampleRateHz, seconds, strings, partials = 14, decayPerSecond = 0.6 } = spec;
	const samples = new Float32Array(Math.round(sampleRateHz * seconds));
	const uniform = createUniform(spec.seed);
	for (const string of strings) {
		const f0 = string.f1Hz / Math.sqrt(1 + string.inharmonicity);
		const sines: DampedSine[] = [];
		for (let n = 1; n <= partials; n++) {
			const hz = n * f0 * Math.sqrt(1 + string.inharmonicity * n * n);
			const phase = 2 * Math.PI * uniform();
			const level = (string.level ?? 1) * (0.7 + 0.6 * uniform());
			if (hz > 0.45 * sampleRateHz) continue;
			sines.push({
				hz,
				glideHz: hz * (2 ** ((spec.glideCents ?? 0) / 1200) - 1),
				glideSeconds: spec.glideSeconds,
				amplitude: level / n,
				decayPerSecond: decayPerSecond * (1 + 0.15 * n),
				phase
			});
		}
		addSines(samples, sampleRateHz, sines, spec.atSeconds ?? 0);
	}
	normalise(samples, 0.5);
	if (spec.snrDb !== undefined) addNoise(samples, sampleRateHz, spec.snrDb, spec.seed + 1);
	return samples;
}

function normalise(samples: Float32Array, peak: number): void {
	const max = samples.reduce((a, b) => Math.max(a, Math.abs(b)), 1e-12);
	for (let i = 0; i < samples.length; i++) samples[i] *= peak / max;
}

/** Adds white noise `snrDb` below the root mean square of the first half second. */
export function addNoise(
	samples: Float32Array,
	sampleRateHz: number,
	snrDb: number,
	seed: number
): void {
	const count = Math.min(samples.length, Math.round(0.5 * sampleRateHz));
	let energy = 0;
	for (let i = 0; i < count; i++) energy += samples[i] * samples[i];
	const sd = Math.sqrt(energy / count) * 10 ** (-snrDb / 20);
	const normal = createNoise(seed);
	for (let i = 0; i < samples.length; i++) samples[i] += sd * normal();
}
