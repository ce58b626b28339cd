import type { PianoId as ShippedPianoId } from '../acoustics/piano-model';
import type { ToleranceSetId } from '../acoustics/tolerances';

/** The closed lists a stimulus may name. */
export const DRILL_PIANOS = [
	'short-upright',
	'medium-grand',
	'long-grand'
] as const satisfies readonly ShippedPianoId[];
export type PianoId = (typeof DRILL_PIANOS)[number];

export const TOLERANCE_SET_IDS = [
	'learning',
	'working',
	'concert'
] as const satisfies readonly ToleranceSetId[];
export type { ToleranceSetId };

export const DRILL_INTERVALS = ['fifth', 'fourth', 'major-third', 'major-sixth'] as const;
export type DrillInterval = (typeof DRILL_INTERVALS)[number];

export const DRILL_NAMES = {
	unison: 'Unison',
	interval: 'Interval',
	'odd-one': 'Which one beats?'
} as const;
