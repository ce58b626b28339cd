/** Decay of the knock, 1/s: gone after about 60 ms. */
const DECAY_PER_SECOND = 85;
/** Rise of the knock, s. */
const RISE_SECONDS = 0.0015;
/** Two one-pole low-passes at this corner give the thud of wood rather than a hiss. */
const CORNER_HZ = 900;
const SILENCE = 1e-7;

/**
 * The short broadband knock of key and hammer: seeded noise, low-passed twice, with a fast rise
 * and an exponential decay. The same seed gives the same knock. Allocates nothing.
 */
export class Knock {
	private readonly decay: number;
	private readonly rise: number;
	private readonly smooth: number;
	/** Makes up for what the low-passes take from white noise. */
	private readonly makeUp: number;
	private state = 1;
	private level = 0;
	private opening = 0;
	private first = 0;
	private second = 0;

	constructor(sampleRateHz: number) {
		this.decay = Math.exp(-DECAY_PER_SECOND / sampleRateHz);
		this.rise = Math.exp(-1 / (RISE_SECONDS * sampleRateHz));
		this.smooth = 1 - Math.exp((-2 * Math.PI * CORNER_HZ) / sampleRateHz);
		this.makeUp = Math.sqrt(4 / this.smooth);
	}

	get active(): boolean {
		return this.level > SILENCE;
	}

	/** Starts a knock; it rises from where an earlier one has got to, so there is no step. */
	start(level: number, seed: number): void {
		this.state = seed >>> 0 || 1;
		this.opening = level > 0 ? Math.min(1, (this.opening * this.level) / level) : 0;
		this.level = level;
	}

	/** Makes what still sounds weaker. */
	scale(factor: number): void {
		this.level *= factor;
	}

	/** Adds `count` samples to `out` from `from`. */
	add(out: Float64Array, from: number, count: number): void {
		if (this.level <= SILENCE) {
			this.level = 0;
			this.first = 0;
			this.second = 0;
			return;
		}
		let { state, level, opening, first, second } = this;
		const { decay, rise, smooth, makeUp } = this;
		for (let t = from; t < from + count; t += 1) {
			state ^= state << 13;
			state ^= state >>> 17;
			state ^= state << 5;
			const white = (state | 0) / 2147483648;
			first += smooth * (white - first);
			second += smooth * (first - second);
			opening = 1 - (1 - opening) * rise;
			out[t] += makeUp * level * opening * second;
			level *= decay;
		}
		this.state = state;
		this.level = level;
		this.opening = opening;
		this.first = first;
		this.second = second;
	}
}
