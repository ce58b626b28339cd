import { A4_MIDI, midiFromNoteName } from '../../acoustics/units';
import type { ScoredDrillId } from '../../drills/types';
import { rateFigure } from '../measurement/figures';
import { groupPairs, judgedGroup, stillLimitHz } from '../measurement/judge';
import { likelyLine } from '../measurement/sentences';
import type { DrillProgress, StringCheck, Trend } from './types';

/** The trend in a word or two, as it stands beside the line. */
export const TREND_WORDS: Readonly<Record<Trend, string>> = {
	there: 'there',
	'closing-in': 'closing in',
	level: 'level',
	'further-off': 'further off',
	'too-few': 'too few days'
};

const MANY: Readonly<Record<ScoredDrillId, string>> = { unison: 'unisons', interval: 'intervals' };

const SENTENCE: Readonly<Record<Trend, string>> = {
	there: 'come out within tolerance',
	'closing-in': 'are closing in',
	level: 'stay where they are',
	'further-off': 'are further off than they were',
	'too-few': 'have too few days yet to tell'
};

/**
 * The finding over all drills as one sentence, for a page's heading.
 * @param whose "Your", or a name with its ending.
 */
export function finding(drills: readonly DrillProgress[], whose: string): string {
	const begun = drills.filter((drill) => drill.points.length > 0);
	if (begun.length === 0) return 'Nothing measured yet.';
	const [first, second] = begun;
	if (second && first.trend === second.trend) {
		return `${whose} ${MANY[first.drill]} and ${MANY[second.drill]} ${SENTENCE[first.trend]}.`;
	}
	const parts = begun.map((drill) => `${MANY[drill.drill]} ${SENTENCE[drill.trend]}`);
	return `${whose} ${parts.join('; ')}.`;
}

/** "Jory’s", "Wes’". */
export function possessive(name: string): string {
	return `${name}${/[sxz]$/i.test(name) ? '’' : '’s'}`;
}

/** Cents with a digit that means something: "0.84", "3.2". */
export function centsFigure(cents: number): string {
	return cents < 1 ? cents.toFixed(2) : cents.toFixed(1);
}

/** "A3" or "A3–C#4"; what was asked, else what was found. */
export function checkedNotes(check: StringCheck): string {
	const names = check.notes.length > 0 ? check.notes : check.result.notes.map(({ note }) => note);
	return names.join('–') || 'no note found';
}

/**
 * What a string check found, in one sentence: at the place that String check judges, and to as many
 * digits.
 */
export function checkFinding(check: StringCheck): string {
	if (check.kind === 'note') return noteFinding(check);
	const groups = groupPairs(check.result);
	const lowMidi = midiFromNoteName(check.notes[0] ?? check.result.notes[0]?.note ?? '') ?? A4_MIDI;
	const pair = (judgedGroup(check.kind, lowMidi, groups) ?? groups[0])?.first;
	if (!pair) return 'No beat measurable.';
	const partials =
		pair.lowerPartial === pair.upperPartial
			? `partial ${pair.lowerPartial}`
			: `partials ${pair.lowerPartial}:${pair.upperPartial}`;
	if (pair.verdict === 'still') {
		return `Still at ${partials}: no beat faster than ${rateFigure(stillLimitHz(pair))} per second.`;
	}
	if (pair.verdict === 'not-measurable' || pair.beatRateHz === null) {
		return `No beat measurable at ${partials}${pair.reason ? `: ${pair.reason}` : ''}.`.replace(
			/\.\.$/,
			'.'
		);
	}
	const about = pair.tier === 'about';
	const rate = `${about ? 'About ' : ''}${rateFigure(pair.beatRateHz, about)}`;
	const likely = likelyLine(pair, null);
	return `${rate} beats per second at ${partials}${likely ? `, ${likely}` : ''}.`;
}

function noteFinding(check: StringCheck): string {
	const note = check.result.notes[0];
	if (!note || note.f1Hz === null) return 'The note was not found.';
	const cents = note.centsFromEqual;
	const away =
		cents === null
			? ''
			: `, ${Math.abs(cents).toFixed(1)} cents ${cents < 0 ? 'below' : 'above'} equal temperament`;
	return `${note.f1Hz.toFixed(2)} Hz${away}.`;
}
