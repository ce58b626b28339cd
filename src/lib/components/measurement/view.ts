import { intervalBetween } from '../../acoustics/intervals';
import type { PairMeasure } from '../../measurement/types';
import type { PairShore } from '../../measurement/client';
import { processingThatIs } from '../../measurement/microphone-facts';
import {
	groupPairs,
	judgedGroup,
	judgeInterval,
	judgeUnison,
	sideOf,
	type IntervalTarget,
	type Judgement,
	type PairGroup,
	type Side
} from './judge';
import {
	closingRemarks,
	headline,
	intervalWord,
	lead,
	noteLines,
	recordingLines
} from './sentences';
import type { Finding } from './string-check.svelte';
import { intervalTarget, PIANO_NAMES, targetF1Hz, unisonTolerance } from './target';

/** One row of the result. */
export interface RowView {
	group: PairGroup;
	side: Side | null;
	shore: PairShore | null;
}

/** A finding as the page shows it. */
export interface FindingView {
	headline: string;
	lead: string;
	notes: { name: string; f1: string | null; lines: string[] }[];
	recording: string[];
	/** heading of the judged place */
	judgedTitle: string;
	judged: RowView | null;
	judgement: Judgement | null;
	target: IntervalTarget | null;
	others: RowView[];
	advice: string[];
	closing: string;
	/** seconds on the axis of the shores */
	seconds: number;
	/** whether anything at all was measured, so that it is worth keeping */
	worthKeeping: boolean;
}

function judgedTitle(finding: Finding, group: PairGroup | null): string {
	if (!group) return '';
	const { kind, lowMidi, highMidi } = finding.asked;
	if (kind === 'interval' && highMidi !== null) {
		const word = intervalWord(lowMidi, highMidi);
		const article = /^[aeiou]/.test(word) ? 'an' : 'a';
		return `Judged at ${group.pitch}, where ${article} ${word} is counted`;
	}
	return `Judged at ${group.pitch}, the ${group.lowerPartial === 1 ? 'fundamental' : 'partial'} that shows this unison best`;
}

/** Target of the judged pair; intervals without a name have none. */
function targetOf({ asked, pianoId }: Finding, group: PairGroup | null): IntervalTarget | null {
	const { kind, lowMidi, highMidi } = asked;
	if (kind !== 'interval' || highMidi === null || !group) return null;
	if (intervalBetween(lowMidi, highMidi) === null) return null;
	return intervalTarget(pianoId, lowMidi, highMidi, group);
}

const answers = (pair: PairMeasure) => pair.verdict !== 'not-measurable';

/** Puts a finding into words and rows; one place is judged, the others are only told. */
export function viewOf(finding: Finding): FindingView {
	const { asked, analysis, source, microphone, pianoId } = finding;
	const { result, doubt, recording, shores } = analysis;
	const groups = groupPairs(result);
	// A note that may not be the one named is shown, but neither judged nor kept.
	const judged = doubt ? null : judgedGroup(asked.kind, asked.lowMidi, groups);
	const sideAt = (group: PairGroup) =>
		asked.kind === 'interval' ? sideOf(result, group.first) : null;
	const row = (group: PairGroup): RowView => {
		const { lowerPartial: p, upperPartial: q } = group;
		const shore = shores.find((s) => s.lowerPartial === p && s.upperPartial === q) ?? null;
		return { group, side: sideAt(group), shore };
	};
	const target = targetOf(finding, judged);
	const side = judged ? sideAt(judged) : null;
	const judgement = !judged
		? null
		: target
			? judgeInterval(judged.first, side, target)
			: asked.kind === 'unison'
				? judgeUnison(judged.first, unisonTolerance(asked.lowMidi))
				: null;
	const others = groups.filter((group) => group !== judged).map(row);
	const midis = [asked.lowMidi, asked.highMidi ?? asked.lowMidi];
	return {
		headline: doubt ?? headline({ asked, result, judged, side, judgement, target }),
		lead: doubt
			? 'What follows holds only if it was. Nothing is judged, and these numbers are not kept.'
			: lead(asked, source, recording.secondsAfterStrike),
		notes: result.notes.map((note, i) => ({
			name: note.note,
			f1: note.f1Hz === null ? null : `${note.f1Hz.toFixed(2)} Hz`,
			lines: noteLines(note, targetF1Hz(pianoId, midis[i]), PIANO_NAMES[pianoId])
		})),
		recording: recordingLines(recording, microphone && processingThatIs(microphone, null)),
		judgedTitle: judgedTitle(finding, judged),
		judged: judged && row(judged),
		judgement,
		target,
		others,
		advice: result.advice,
		closing: closingRemarks(
			[side, ...others.map((r) => r.side)],
			asked.kind === 'unison' && groups.some((group) => group.first.verdict === 'still')
		),
		seconds: Math.min(asked.seconds, recording.secondsAfterStrike),
		worthKeeping:
			!doubt && (result.notes.some((n) => n.f1Hz !== null) || result.pairs.some(answers))
	};
}
