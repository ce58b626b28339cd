import { INTERVALS, intervalBetween } from '../../acoustics/intervals';
import { centsBetween, noteName } from '../../acoustics/units';
import type { RecordingFacts } from '../../measurement/recording-facts';
import type { MeasureResult, NoteMeasure, PairMeasure } from '../../measurement/types';
import { centsFrom, ordinal, rateFigure, stiffnessFigure, wholeHz } from './figures';
import {
	centsOfBeats,
	insideRates,
	stillLimitHz,
	type IntervalTarget,
	type Judgement,
	type PairGroup,
	type Side
} from './judge';

/** What the person said was struck. */
export interface Asked {
	kind: 'note' | 'unison' | 'interval';
	/** the note, or the lower one */
	lowMidi: number;
	/** the upper note of an interval, else null */
	highMidi: number | null;
	/** seconds listened to after the strike */
	seconds: number;
}

/** "A3" or "A3–D4". */
export function askedName({ lowMidi, highMidi }: Asked): string {
	return highMidi === null ? noteName(lowMidi) : `${noteName(lowMidi)}–${noteName(highMidi)}`;
}

/** "fourth", "unison" … for running text; "interval" for one without a name. */
export function intervalWord(lowMidi: number, highMidi: number): string {
	const id = intervalBetween(lowMidi, highMidi);
	return id === null ? 'interval' : INTERVALS[id].name;
}

const beatsPerSecond = (pair: PairMeasure) => {
	const about = pair.tier === 'about';
	return `${about ? 'about ' : ''}${rateFigure(pair.beatRateHz ?? 0, about)} beats per second`;
};

const VERDICT_PHRASE = {
	inside: 'is inside',
	outside: 'is outside',
	near: 'is too close to say',
	still: 'is inside'
} as const;

function intervalHeadline(
	name: string,
	pair: PairMeasure,
	side: Side | null,
	judgement: Judgement | null,
	target: IntervalTarget | null
): string {
	if (!judgement) return `${name}: ${beatsPerSecond(pair)}${side ? `, ${side}` : ''}.`;
	if (target?.oneSided && side && side !== target.direction) {
		return `${name} is on the wrong side: ${beatsPerSecond(pair)}, ${side} instead of ${target.direction}.`;
	}
	const phrase = VERDICT_PHRASE[judgement.verdict];
	return `${name} ${phrase}: ${beatsPerSecond(pair)}${side ? `, ${side}` : ''}.`;
}

function unisonHeadline(name: string, pair: PairMeasure, judgement: Judgement | null): string {
	if (pair.verdict === 'still') {
		return `${name} is still, as far as ${secondsHeard(pair)} seconds can show.`;
	}
	if (!judgement || judgement.value === null) return `${name}: ${beatsPerSecond(pair)}.`;
	const cents = `${judgement.value.toFixed(1)} cents apart`;
	return `${name} ${VERDICT_PHRASE[judgement.verdict]}: the strings are ${cents}.`;
}

function noteHeadline(name: string, note: NoteMeasure | undefined): string {
	if (!note || note.f1Hz === null) return `${name} was not found in this sound.`;
	const cents = note.centsFromEqual ?? 0;
	return `${note.note} sounds at ${note.f1Hz.toFixed(2)} Hz, ${centsFrom(cents)} equal temperament.`;
}

/** The finding as one sentence, for the page's heading. */
export function headline(input: {
	asked: Asked;
	result: MeasureResult;
	judged: PairGroup | null;
	side: Side | null;
	judgement: Judgement | null;
	target: IntervalTarget | null;
}): string {
	const { asked, result, judged, side, judgement, target } = input;
	const name = askedName(asked);
	if (asked.kind === 'note') return noteHeadline(name, result.notes[0]);
	if (!judged || judged.first.verdict === 'not-measurable') {
		return `${name}: no beat can be measured.`;
	}
	return asked.kind === 'interval'
		? intervalHeadline(name, judged.first, side, judgement, target)
		: unisonHeadline(name, judged.first, judgement);
}

function secondsHeard(pair: PairMeasure): number {
	return Math.max(1, Math.round(pair.windowSeconds[1]));
}

/** Under the heading: what was struck and for how long it was heard. */
export function lead(asked: Asked, source: 'microphone' | 'file', seconds: number): string {
	const heard = Math.round(10 * Math.min(seconds, asked.seconds)) / 10;
	const where = source === 'file' ? 'from your file' : 'through the microphone';
	const low = noteName(asked.lowMidi);
	if (asked.kind === 'interval' && asked.highMidi !== null) {
		const kind = intervalWord(asked.lowMidi, asked.highMidi);
		return `The ${kind} ${low} up to ${noteName(asked.highMidi)}, ${where}, heard for ${heard} seconds.`;
	}
	const what = asked.kind === 'unison' ? `The strings of ${low} together` : `${low}, one string`;
	return `${what}, ${where}, heard for ${heard} seconds.`;
}

/** Lines under a note's frequency. */
export function noteLines(
	note: NoteMeasure,
	targetF1Hz: number | null,
	pianoName: string
): string[] {
	if (note.f1Hz === null) return ['Not found in this sound.'];
	const lines: string[] = [];
	const doubt = note.f1Ci95Hz
		? `, ± ${Math.max(0.05, centsBetween(note.f1Ci95Hz[1], note.f1Ci95Hz[0]) / 2).toFixed(1)}`
		: '';
	lines.push(`${centsFrom(note.centsFromEqual ?? 0)} equal temperament${doubt}`);
	if (targetF1Hz !== null) {
		lines.push(`${centsFrom(centsBetween(note.f1Hz, targetF1Hz))} the ${pianoName}’s target`);
	}
	if (note.inharmonicity === null) lines.push('Inharmonicity not found');
	else {
		const ci = note.inharmonicityCi95;
		const figure = (b: number) => stiffnessFigure(b, ci ? (ci[1] - ci[0]) / 2 : 0);
		const likely = ci ? `, very likely ${figure(ci[0])} to ${figure(ci[1])}` : '';
		lines.push(`Inharmonicity ${figure(note.inharmonicity)}${likely}`);
	}
	return lines;
}

/** What the recording is worth. @param untouched null for a file, else whether the browser says so */
export function recordingLines(facts: RecordingFacts, unknown: string[] | null): string[] {
	const lines: string[] = [];
	if (facts.aboveRoomDb !== null) lines.push(`${Math.round(facts.aboveRoomDb)} dB above the room.`);
	if (facts.clipped)
		lines.push('Overdriven: the loudest moment is cut off. Move the microphone away.');
	if (facts.quiet) lines.push('Very quiet: move the microphone nearer, or strike more firmly.');
	if (unknown === null) lines.push('From a file: what was done to it before is not known.');
	else if (unknown.length === 0) lines.push('Nothing in the browser touched it.');
	else lines.push(`The browser does not say whether ${unknown.join(' and ')} is off.`);
	return lines;
}

/** "4th and 3rd, 881 Hz" for an interval, "4th partial, 881 Hz" for one note. */
export function placeLine(group: PairGroup): string {
	const { lowerPartial: p, upperPartial: q } = group;
	const which = p === q ? `${ordinal(p)} partial` : `${ordinal(p)} and ${ordinal(q)}`;
	return `${which}, ${wholeHz(group.frequencyHz)} Hz`;
}

/** What is said of one measured rate: side and interval. */
export function likelyLine(pair: PairMeasure, side: Side | null): string {
	const about = pair.tier === 'about';
	const likely = pair.ci95Hz
		? `very likely ${rateFigure(pair.ci95Hz[0], about)} to ${rateFigure(pair.ci95Hz[1], about)}`
		: '';
	return [side, likely].filter(Boolean).join(', ');
}

/** "target 0.90 wide, inside 0.70 to 1.10". */
export function targetLine(target: IntervalTarget, frequencyHz: number): string {
	const [from, to] = insideRates(target, frequencyHz);
	const goal = `target ${rateFigure(target.beatRateHz)} ${target.direction}, inside`;
	if (from >= 0) return `${goal} ${rateFigure(from)} to ${rateFigure(to)}`;
	const other = target.direction === 'wide' ? 'narrow' : 'wide';
	return `${goal} ${rateFigure(-from)} ${other} to ${rateFigure(to)} ${target.direction}`;
}

/**
 * What a still place means: the slowest beat that would have shown, and how far apart two strings
 * can be as they sound together (alone they may differ by more: see {@link closingRemarks}).
 */
export function stillLine(pair: PairMeasure, twoStrings: boolean): string {
	const limit = stillLimitHz(pair);
	const first = `A beat slower than ${rateFigure(limit)} per second would not have shown.`;
	if (!twoStrings) return first;
	const cents = centsOfBeats(limit, pair.frequencyHz).toFixed(2);
	return `${first} Together they sound at most ${cents} cents apart.`;
}

/** What to do about a place that could not be measured; empty when the reason says it already. */
export function remedy(pair: PairMeasure, seconds: number): string {
	const reason = pair.reason ?? '';
	if (/strike|set the input|ring longer/.test(reason)) return '';
	if (/weak/.test(reason)) return 'Move the microphone nearer, or strike more firmly.';
	if (/short/.test(reason)) return 'Let the string ring on, with the damper off.';
	if (/[Ss]everal/.test(reason)) return 'Mute all strings but those you mean.';
	return seconds < 8 ? 'Listen for 8 seconds.' : '';
}

/** Lines for weaker beats at the same place. */
export function otherLines(group: PairGroup): string[] {
	return group.others
		.filter((p) => p.verdict === 'beating' && p.beatRateHz !== null)
		.map(
			(p) =>
				`also, weaker, ${rateFigure(p.beatRateHz ?? 0, p.tier === 'about')}: ${likelyLine(p, null)}`
		);
}

/** The shore in words, for those who do not see it. */
export function shoreLabel(group: PairGroup): string {
	const { first } = group;
	const what =
		first.verdict === 'beating'
			? `it swells and sinks ${rateFigure(first.beatRateHz ?? 0)} times per second`
			: first.verdict === 'still'
				? 'it dies away without a beat'
				: 'no beat can be read from it';
	return `Loudness at ${group.pitch} over the time heard: ${what}.`;
}

/**
 * Remarks at the end of a result.
 * @param stillUnison whether strings of one note stood still somewhere: they may be locked
 */
export function closingRemarks(sides: readonly (Side | null)[], stillUnison: boolean): string {
	const both = sides.includes('wide') && sides.includes('narrow');
	const stiff = both
		? 'Wide at one place and narrow at another is no contradiction: stiff wire spreads the partials, so an interval has a beat of its own at each meeting place. '
		: '';
	const locked = stillUnison
		? 'Strings this close draw each other into one pitch over the bridge; struck one by one they may lie a little further apart. '
		: '';
	return `${stiff}${locked}“Very likely” is the 95 % range.`;
}
