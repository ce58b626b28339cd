import { partialHzFromF1 } from '../../acoustics/stiff-string';
import { toleranceBeatsHz } from '../../acoustics/tolerances';
import { centsBetween, equalTemperamentHz, noteName } from '../../acoustics/units';
import type { Interval95, MeasureResult, NoteMeasure, PairMeasure } from '../../measurement/types';
import { verdictOf, type Limits } from '../charts/range';

export type Side = 'wide' | 'narrow';

/** What an interval should do on the piano that was chosen. */
export interface IntervalTarget {
	pianoName: string;
	/** beats per second, unsigned */
	beatRateHz: number;
	direction: Side;
	lowerPartial: number;
	upperPartial: number;
	/** allowed distance in cents at the judged partial */
	toleranceCents: number;
	/**
	 * Whether the interval is tempered to one side on purpose, as thirds, fourths, fifths and sixths
	 * are; octaves and what is made of them may lie a little to either side.
	 */
	oneSided: boolean;
}

/** All that was found where two partials meet. */
export interface PairGroup {
	lowerPartial: number;
	upperPartial: number;
	frequencyHz: number;
	/** name of the nearest note, with sharps */
	pitch: string;
	first: PairMeasure;
	/** weaker components that beat at the same place */
	others: PairMeasure[];
}

/** One verdict: a value against its tolerance, in one unit. */
export interface Judgement {
	verdict: 'inside' | 'outside' | 'near' | 'still';
	/** null for still, which has only a limit */
	value: number | null;
	interval: Interval95;
	tolerance: Limits;
	unit: 'beats per second' | 'cents';
}

/** Name of the note nearest to a frequency. */
export function pitchName(frequencyHz: number): string {
	return noteName(69 + centsBetween(frequencyHz, equalTemperamentHz(69)) / 100);
}

/** Entries gathered by their pair of partials, in the order of the result. */
export function groupPairs(result: MeasureResult): PairGroup[] {
	const groups: PairGroup[] = [];
	for (const pair of result.pairs) {
		const { lowerPartial, upperPartial, frequencyHz } = pair;
		const group = groups.find(
			(g) => g.lowerPartial === lowerPartial && g.upperPartial === upperPartial
		);
		if (group) group.others.push(pair);
		else {
			const pitch = pitchName(frequencyHz);
			groups.push({ lowerPartial, upperPartial, frequencyHz, pitch, first: pair, others: [] });
		}
	}
	return groups;
}

/**
 * Partials of a unison in the order in which they are asked for the verdict. Below C5 the first
 * partials of nearly equal strings lock, so upper ones are judged (common practice, no source).
 */
function unisonPreference(midi: number): readonly number[] {
	return midi < 72 ? [4, 3, 5, 2, 6, 1, 8, 7] : [2, 1, 3, 4];
}

const isAnswer = (group: PairGroup) => group.first.verdict !== 'not-measurable';

/**
 * The one place that is judged: the customary pair of an interval, which stands first; of a unison
 * the first partial in order of preference that was measured firmly, or else measured at all. A
 * single note is not judged.
 */
export function judgedGroup(
	kind: 'note' | 'unison' | 'interval',
	midi: number,
	groups: readonly PairGroup[]
): PairGroup | null {
	if (kind === 'note') return null;
	if (kind === 'interval') return groups[0] ?? null;
	const answers = unisonPreference(midi)
		.map((n) => groups.find((g) => g.lowerPartial === n && isAnswer(g)))
		.filter((g) => g !== undefined);
	return answers.find((g) => g.first.tier !== 'about') ?? answers[0] ?? null;
}

/** Place of a note's partial in hertz and half of its 95 % interval; null when B is not known. */
function partialWithDoubt(note: NoteMeasure, n: number): { hz: number; doubt: number } | null {
	const { f1Hz, f1Ci95Hz, inharmonicity, inharmonicityCi95 } = note;
	if (f1Hz === null || f1Ci95Hz === null || inharmonicity === null || !inharmonicityCi95)
		return null;
	const hz = partialHzFromF1(n, f1Hz, inharmonicity);
	const fromF1 = (n * (f1Ci95Hz[1] - f1Ci95Hz[0])) / 2;
	const fromB = (hz * (n * n - 1) * (inharmonicityCi95[1] - inharmonicityCi95[0])) / 4;
	return { hz, doubt: Math.hypot(fromF1, fromB) };
}

/**
 * Side of an interval by where the two notes' partials stand: an ear cannot tell it from the beat
 * alone. Null when their places are not known well enough, or contradict the beat that was measured.
 */
export function sideOf(result: MeasureResult, pair: PairMeasure): Side | null {
	if (result.notes.length < 2) return null;
	const low = partialWithDoubt(result.notes[0], pair.lowerPartial);
	const high = partialWithDoubt(result.notes[1], pair.upperPartial);
	if (!low || !high) return null;
	const signed = high.hz - low.hz;
	const doubt = 1.5 * Math.hypot(low.doubt, high.doubt);
	if (Math.abs(signed) <= doubt) return null;
	const { beatRateHz, ci95Hz } = pair;
	if (beatRateHz !== null && ci95Hz !== null) {
		const gap = Math.abs(Math.abs(signed) - beatRateHz);
		if (gap > Math.max(doubt + (ci95Hz[1] - ci95Hz[0]) / 2, 0.25 * beatRateHz)) return null;
	}
	return signed > 0 ? 'wide' : 'narrow';
}

/**
 * Rates that count as inside, counted on the target's side; those of a one-sided interval never
 * reach over beatless.
 */
export function insideRates(target: IntervalTarget, frequencyHz: number): [number, number] {
	const reach = toleranceBeatsHz(target.toleranceCents, frequencyHz);
	const least = target.beatRateHz - reach;
	return [target.oneSided ? Math.max(0, least) : least, target.beatRateHz + reach];
}

/**
 * Verdict of an interval, in beats per second counted on the target's side (the other side is
 * negative). With the side unknown it is inside or outside only if both sides say the same.
 */
export function judgeInterval(
	pair: PairMeasure,
	side: Side | null,
	target: IntervalTarget
): Judgement | null {
	const { beatRateHz, ci95Hz } = pair;
	if (pair.verdict !== 'beating' || beatRateHz === null || ci95Hz === null) return null;
	const tolerance = insideRates(target, pair.frequencyHz);
	const mirrored: Interval95 = [-ci95Hz[1], -ci95Hz[0]];
	const onSide = verdictOf(ci95Hz, tolerance);
	const across = verdictOf(mirrored, tolerance);
	const right = side === null ? null : side === target.direction;
	const verdict = right === null ? (onSide === across ? onSide : 'near') : right ? onSide : across;
	return {
		verdict,
		value: right === false ? -beatRateHz : beatRateHz,
		interval: right === false ? mirrored : ci95Hz,
		tolerance,
		unit: 'beats per second'
	};
}

/**
 * Slowest beat that would have shown. The meter names it in its reason; without that it is taken as
 * one and a half cycles in the time heard.
 */
export function stillLimitHz(pair: PairMeasure): number {
	const named = /([0-9]+\.[0-9]+) per second/.exec(pair.reason ?? '');
	if (named) return Number(named[1]);
	const seconds = pair.windowSeconds[1] - pair.windowSeconds[0];
	return 1.5 / Math.max(0.1, seconds);
}

/** Cents between two strings that beat at this rate at a partial of this frequency. */
export function centsOfBeats(beatRateHz: number, frequencyHz: number): number {
	return 1200 * Math.log2(1 + beatRateHz / frequencyHz);
}

/** Verdict of a unison in cents between the strings; null when nothing was measured. */
export function judgeUnison(pair: PairMeasure, toleranceCents: number): Judgement | null {
	const inCents = (hz: number) => centsOfBeats(hz, pair.frequencyHz);
	const common = { tolerance: [null, toleranceCents] as const, unit: 'cents' as const };
	if (pair.verdict === 'still') {
		const limit = inCents(stillLimitHz(pair));
		const verdict = limit <= toleranceCents ? 'still' : 'near';
		return { ...common, verdict, value: null, interval: [0, limit] };
	}
	if (pair.verdict !== 'beating' || pair.beatRateHz === null || pair.ci95Hz === null) return null;
	const interval: Interval95 = [inCents(pair.ci95Hz[0]), inCents(pair.ci95Hz[1])];
	const verdict = verdictOf(interval, common.tolerance);
	return { ...common, verdict, value: inCents(pair.beatRateHz), interval };
}
