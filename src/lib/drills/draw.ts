import { integer, shuffled, type Random } from '../acoustics/random';
import type { Midi } from '../acoustics/units';
import { DRILL_PIANOS } from './catalogue';
import type { BlockOptions, PianoId } from './types';

/** One of the options' pianos for each trial; when varied, each piano comes about equally often. */
export function drawPianos(random: Random, options: BlockOptions, count: number): PianoId[] {
	const { piano } = options;
	if (piano !== 'varied') return Array.from({ length: count }, () => piano);
	return drawEvenly(random, DRILL_PIANOS, count);
}

/** Each item about equally often, in random order. */
export function drawEvenly<T>(random: Random, items: readonly T[], count: number): T[] {
	const order = shuffled(random, items);
	return shuffled(
		random,
		Array.from({ length: count }, (_, index) => order[index % order.length])
	);
}

/**
 * `count` notes spread over a range: one from each of `count` equal parts of it, in random order, so
 * that a block neither stays in one register nor climbs through it.
 */
export function drawSpreadNotes(random: Random, low: Midi, high: Midi, count: number): Midi[] {
	const width = (high - low + 1) / count;
	const notes = Array.from({ length: count }, (_, part) => {
		const from = low + Math.ceil(part * width);
		const to = low + Math.ceil((part + 1) * width) - 1;
		return integer(random, from, Math.max(from, to));
	});
	return shuffled(random, notes);
}

/** Half of the trials start below, half above, in random order. */
export function drawSides(random: Random, count: number): (-1 | 1)[] {
	return drawEvenly<-1 | 1>(random, [-1, 1], count);
}

/** A size in cents from `low` to `high`, in hundredths. */
export function drawHundredths(random: Random, low: number, high: number): number {
	return integer(random, Math.round(low * 100), Math.round(high * 100)) / 100;
}

/** Strength of a blow in per cent, from soft to firm; never a test blow. */
export function drawVelocityPercent(random: Random): number {
	return integer(random, 40, 80);
}
