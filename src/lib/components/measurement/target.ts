import { intervalBetween, type IntervalId, type PartialPair } from '../../acoustics/intervals';
import { targetBeat } from '../../acoustics/targets';
import { toleranceCents } from '../../acoustics/tolerances';
import type { PianoId } from '../../drills/catalogue';
import { tunedPiano } from '../../drills/tuned-piano';
import type { IntervalTarget } from './judge';

/** Names of the pianos for running text, "the medium grand's target". */
export const PIANO_NAMES: Readonly<Record<PianoId, string>> = {
	'short-upright': 'short upright',
	'medium-grand': 'medium grand',
	'long-grand': 'long grand'
};

/** The tolerance in force on this page. */
export const TOLERANCE_SET = 'learning';

const TWO_SIDED: readonly IntervalId[] = ['unison', 'octave', 'double-octave', 'twelfth'];

/** Tolerance of an interval in cents: the wider of its two notes'. */
export function intervalToleranceCents(lowMidi: number, highMidi: number): number {
	const of = (midi: number) => toleranceCents(TOLERANCE_SET, 'interval', midi);
	return Math.max(of(lowMidi), of(highMidi));
}

/** Tolerance of a unison in cents between its strings. */
export const unisonTolerance = (midi: number) => toleranceCents(TOLERANCE_SET, 'unison', midi);

/** Target of an interval at one pair of partials on one of the shipped pianos. */
export function intervalTarget(
	pianoId: PianoId,
	lowMidi: number,
	highMidi: number,
	pair: PartialPair
): IntervalTarget {
	const { model, tuning } = tunedPiano(pianoId);
	const beat = targetBeat(model, tuning, lowMidi, highMidi, pair);
	const interval = intervalBetween(lowMidi, highMidi);
	return {
		pianoName: PIANO_NAMES[pianoId],
		beatRateHz: beat.beatRateHz,
		direction: beat.direction,
		lowerPartial: beat.lowerPartial,
		upperPartial: beat.upperPartial,
		toleranceCents: intervalToleranceCents(lowMidi, highMidi),
		oneSided: interval !== null && !TWO_SIDED.includes(interval)
	};
}

/** Where a note's first partial belongs on one of the shipped pianos, in hertz. */
export function targetF1Hz(pianoId: PianoId, midi: number): number {
	return tunedPiano(pianoId).tuning.f1Hz(midi);
}
