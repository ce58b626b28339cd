/** A source of uniform numbers in [0, 1). Always seeded: nothing here reads a clock or global randomness. */
export type Random = () => number;

/**
 * Generator sfc32 (small fast counting, 128 bits of state; C. Doty-Humphrey, PractRand), the
 * state filled from one 32-bit seed by splitmix32 and then run 16 times. The same seed gives the
 * same sequence on every machine. Seeds are taken modulo 2^32.
 */
export function createRandom(seed: number): Random {
	let filler = seed >>> 0;
	const fill = (): number => {
		filler = (filler + 0x9e3779b9) | 0;
		let mixed = filler ^ (filler >>> 16);
		mixed = Math.imul(mixed, 0x21f0aaad);
		mixed ^= mixed >>> 15;
		mixed = Math.imul(mixed, 0x735a2d97);
		return mixed ^ (mixed >>> 15);
	};
	let a = fill();
	let b = fill();
	let c = fill();
	let counter = 1;
	const next = (): number => {
		const sum = (((a + b) | 0) + counter) | 0;
		counter = (counter + 1) | 0;
		a = b ^ (b >>> 9);
		b = (c + (c << 3)) | 0;
		c = (((c << 21) | (c >>> 11)) + sum) | 0;
		return (sum >>> 0) / 4294967296;
	};
	for (let round = 0; round < 16; round += 1) next();
	return next;
}

/** Uniform in [low, high). */
export function uniform(random: Random, low: number, high: number): number {
	return low + (high - low) * random();
}

/** Whole number from `low` to `high`, both included. */
export function integer(random: Random, low: number, high: number): number {
	return low + Math.floor(random() * (high - low + 1));
}

/** One element of a list that is not empty. */
export function pick<T>(random: Random, items: readonly T[]): T {
	if (items.length === 0) throw new RangeError('pick needs at least one item');
	return items[Math.floor(random() * items.length)];
}

/** Standard normal deviate (Box & Muller 1958); always takes two numbers from the source. */
export function normal(random: Random): number {
	const radius = Math.sqrt(-2 * Math.log(1 - random()));
	return radius * Math.cos(2 * Math.PI * random());
}

/** The list in random order, the original untouched (Fisher & Yates). */
export function shuffled<T>(random: Random, items: readonly T[]): T[] {
	const result = [...items];
	for (let last = result.length - 1; last > 0; last -= 1) {
		const other = integer(random, 0, last);
		[result[last], result[other]] = [result[other], result[last]];
	}
	return result;
}
