import { describe, expect, it } from 'vitest';
import { partialHzFromF1 } from '../../acoustics/stiff-string';
import {
	groupPairs,
	insideRates,
	judgedGroup,
	judgeInterval,
	judgeUnison,
	pitchName,
	sideOf,
	stillLimitHz,
	type IntervalTarget
} from './judge';
import { beating, note, pair } from './test-findings';

const fourth: IntervalTarget = {
	pianoName: 'medium grand',
	beatRateHz: 0.9,
	direction: 'wide',
	lowerPartial: 4,
	upperPartial: 3,
	toleranceCents: 2,
	oneSided: true
};
const octave: IntervalTarget = { ...fourth, beatRateHz: 0.1, oneSided: false };

describe('side of an interval', () => {
	const result = (highF1: number, doubt = 0.01) => ({
		notes: [
			note('A3', 220, 0.0002),
			note('D4', highF1, 0.0003, { f1Ci95Hz: [highF1 - doubt, highF1 + doubt] })
		],
		pairs: [],
		advice: []
	});
	// The upper note's f1 for which its third partial stands `rate` above the lower note's fourth.
	const highFor = (rate: number) => {
		const unit = partialHzFromF1(3, 1, 0.0003);
		return (partialHzFromF1(4, 220, 0.0002) + rate) / unit;
	};

	it('is where the upper note’s partial stands', () => {
		expect(sideOf(result(highFor(0.9)), beating(4, 3, 881, 0.9, 0.05))).toBe('wide');
		expect(sideOf(result(highFor(-0.9)), beating(4, 3, 881, 0.9, 0.05))).toBe('narrow');
	});

	it('is not known when the places are doubtful or contradict the beat', () => {
		expect(sideOf(result(highFor(0.9), 0.4), beating(4, 3, 881, 0.9, 0.05))).toBeNull();
		expect(sideOf(result(highFor(0.9)), beating(4, 3, 881, 6, 0.05))).toBeNull();
		const blind = result(highFor(0.9));
		blind.notes[1].inharmonicity = null;
		expect(sideOf(blind, beating(4, 3, 881, 0.9, 0.05))).toBeNull();
	});
});

describe('verdict of an interval', () => {
	it('takes the tolerance as beats at the partial and never reaches over beatless', () => {
		// 2 cents at 881 Hz are 881·(2^(2/1200) − 1) = 1.018 b/s (computed).
		const [from, to] = insideRates(fourth, 881);
		expect(from).toBe(0);
		expect(to).toBeCloseTo(0.9 + 1.018, 3);
		expect(insideRates(octave, 881)[0]).toBeCloseTo(0.1 - 1.018, 3);
	});

	it.each([
		[0.9, 0.05, 'wide', 'inside'],
		[1.9, 0.1, 'wide', 'near'],
		[2.5, 0.1, 'wide', 'outside'],
		[0.9, 0.05, 'narrow', 'outside'],
		[0.9, 0.05, null, 'near'],
		[2.5, 0.1, null, 'outside']
	] as const)('%f ± %f %s is %s', (rate, half, side, verdict) => {
		const judgement = judgeInterval(beating(4, 3, 881, rate, half), side, fourth);
		expect(judgement?.verdict).toBe(verdict);
		expect(judgement?.value).toBe(side === 'narrow' ? -rate : rate);
	});

	it('lets an octave lie a little to either side', () => {
		expect(judgeInterval(beating(4, 2, 881, 0.5, 0.05), 'narrow', octave)?.verdict).toBe('inside');
		expect(judgeInterval(beating(4, 2, 881, 0.5, 0.05), null, octave)?.verdict).toBe('inside');
	});

	it('gives none without a rate', () => {
		expect(judgeInterval(pair(4, 3, 881), 'wide', fourth)).toBeNull();
	});
});

describe('verdict of a unison', () => {
	it('turns beats at a partial into cents between the strings', () => {
		// 0.38 b/s at 1,177 Hz are 1200·log2(1 + 0.38/1177) = 0.559 cents (computed).
		const judged = judgeUnison(beating(4, 4, 1177, 0.38, 0.02), 1);
		expect(judged?.value).toBeCloseTo(0.559, 3);
		expect(judged?.verdict).toBe('inside');
		expect(judgeUnison(beating(4, 4, 1177, 2, 0.05), 1)?.verdict).toBe('outside');
		expect(judgeUnison(beating(4, 4, 1177, 0.68, 0.05), 1)?.verdict).toBe('near');
	});

	it('still is inside only as far as its limit reaches', () => {
		const still = (limit: string) =>
			pair(4, 4, 1177, {
				verdict: 'still',
				reason: `No beat faster than ${limit} per second in the time heard.`
			});
		expect(stillLimitHz(still('0.38'))).toBe(0.38);
		expect(stillLimitHz(pair(4, 4, 1177, { verdict: 'still', reason: null }))).toBeCloseTo(0.6, 6);
		expect(judgeUnison(still('0.38'), 0.6)).toMatchObject({ verdict: 'still', value: null });
		expect(judgeUnison(still('0.90'), 0.6)?.verdict).toBe('near');
	});
});

describe('the judged place', () => {
	const groupsOf = (...pairs: ReturnType<typeof pair>[]) =>
		groupPairs({ notes: [], pairs, advice: [] });

	it('gathers several components of one place and names its pitch', () => {
		const groups = groupsOf(
			beating(4, 4, 881, 1, 0.1),
			beating(4, 4, 881, 2, 0.1),
			pair(5, 5, 1102)
		);
		expect(groups.length).toBe(2);
		expect(groups[0].others.length).toBe(1);
		expect(groups.map((g) => g.pitch)).toEqual(['A5', 'C#6']);
		expect(pitchName(440)).toBe('A4');
	});

	it('is the first pair of an interval, measured or not, and none of a note', () => {
		const groups = groupsOf(pair(4, 3, 881), beating(8, 6, 1771, 2, 0.1));
		expect(judgedGroup('interval', 57, groups)?.lowerPartial).toBe(4);
		expect(judgedGroup('note', 57, groups)).toBeNull();
	});

	it('of a unison is an upper partial that was measured', () => {
		const groups = groupsOf(
			beating(1, 1, 220, 0.3, 0.1),
			beating(3, 3, 660, 0.9, 0.1),
			pair(4, 4, 881)
		);
		expect(judgedGroup('unison', 57, groups)?.lowerPartial).toBe(3);
		expect(judgedGroup('unison', 84, groups)?.lowerPartial).toBe(1);
		expect(judgedGroup('unison', 57, groupsOf(pair(4, 4, 881)))).toBeNull();
	});

	it('of a unison is a firm answer before one that is only about right', () => {
		const unsure = beating(4, 4, 881, 2, 0.2, { tier: 'about' });
		expect(
			judgedGroup('unison', 57, groupsOf(beating(2, 2, 440, 1, 0.03), unsure))?.lowerPartial
		).toBe(2);
		expect(judgedGroup('unison', 57, groupsOf(unsure))?.lowerPartial).toBe(4);
	});
});
