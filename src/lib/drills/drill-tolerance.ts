import type { Cents } from '../acoustics/units';
import type { ToleranceSetId } from './types';

/** How far a string may be left from where it belongs, cents (common practice, no source). */
const TOLERANCES: Readonly<Record<ToleranceSetId, { unison: Cents; temperament: Cents }>> = {
	learning: { unison: 1, temperament: 2 },
	working: { unison: 0.6, temperament: 1 },
	concert: { unison: 0.3, temperament: 0.5 }
};

/** Tolerance of a unison, cents between the strings' own f_1. */
export function unisonToleranceCents(set: ToleranceSetId): Cents {
	return TOLERANCES[set].unison;
}

/** Tolerance of a note of the temperament octave, cents of its f_1. */
export function temperamentToleranceCents(set: ToleranceSetId): Cents {
	return TOLERANCES[set].temperament;
}
