import { createRandom } from '../acoustics/random';
import {
	drawHundredths,
	drawPianos,
	drawSides,
	drawSpreadNotes,
	drawVelocityPercent
} from './draw';
import type { BlockOptions, UnisonTrialSpec } from './types';

/** C3 to C6: plain wire, three strings a note, on all three pianos. */
export const UNISON_LOW_MIDI = 48;
export const UNISON_HIGH_MIDI = 84;
/** Starting errors in cents: well outside, and below about 10 b/s at C6. */
const START_CENTS = { low: 6, high: 16 } as const;

/** Trials of a unison block: note, piano, blow, starting error and its side vary. */
export function unisonTrials(
	seed: number,
	options: BlockOptions,
	count: number
): UnisonTrialSpec[] {
	const random = createRandom(seed);
	const pianos = drawPianos(random, options, count);
	const notes = drawSpreadNotes(random, UNISON_LOW_MIDI, UNISON_HIGH_MIDI, count);
	const sides = drawSides(random, count);
	return notes.map((midi, index) => ({
		drill: 'unison',
		index,
		piano: pianos[index],
		midi,
		velocityPercent: drawVelocityPercent(random),
		startCents: sides[index] * drawHundredths(random, START_CENTS.low, START_CENTS.high),
		toleranceSet: options.toleranceSet
	}));
}
