import { INTERVALS } from '../acoustics/intervals';
import { createRandom, integer } from '../acoustics/random';
import { DRILL_INTERVALS } from './catalogue';
import { drawEvenly, drawHundredths, drawPianos, drawSides, drawVelocityPercent } from './draw';
import type { BlockOptions, IntervalTrialSpec } from './types';

/** The temperament octave F3 to F4: both notes lie in it. */
export const TEMPERAMENT_LOW_MIDI = 53;
export const TEMPERAMENT_HIGH_MIDI = 65;
/** Starting errors in cents, kept below about 18 b/s for the fastest sixth. */
const START_CENTS = { low: 4, high: 12 } as const;

/** Trials of an interval block: interval, notes, which note moves, piano, blow and start vary. */
export function intervalTrials(
	seed: number,
	options: BlockOptions,
	count: number
): IntervalTrialSpec[] {
	const random = createRandom(seed);
	const pianos = drawPianos(random, options, count);
	const intervals = drawEvenly(random, options.intervals ?? DRILL_INTERVALS, count);
	const sides = drawSides(random, count);
	const moving = drawEvenly(random, ['low', 'high'] as const, count);
	return intervals.map((interval, index) => {
		const { semitones } = INTERVALS[interval];
		const lowMidi = integer(random, TEMPERAMENT_LOW_MIDI, TEMPERAMENT_HIGH_MIDI - semitones);
		return {
			drill: 'interval',
			index,
			piano: pianos[index],
			interval,
			lowMidi,
			highMidi: lowMidi + semitones,
			moving: moving[index],
			velocityPercent: drawVelocityPercent(random),
			startCents: sides[index] * drawHundredths(random, START_CENTS.low, START_CENTS.high),
			toleranceSet: options.toleranceSet
		};
	});
}
