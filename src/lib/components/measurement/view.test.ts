import { describe, expect, it } from 'vitest';
import { partialHzFromF1 } from '../../acoustics/stiff-string';
import { centsFrom, ordinal, rateFigure, stiffnessFigure, wholeHz } from './figures';
import { targetF1Hz } from './target';
import { beating, finding, note, pair } from './test-findings';
import { viewOf } from './view';

const A3 = targetF1Hz('medium-grand', 57);

/** A3–D4 with D4 where the fourth beats `rate` (wide > 0) at the 4:3 pair. */
function fourth(rate: number, half = 0.04, measured = Math.abs(rate)) {
	const high = (partialHzFromF1(4, A3, 0.0003) + rate) / partialHzFromF1(3, 1, 0.0003);
	return finding(
		{},
		{
			notes: [note('A3', A3), note('D4', high)],
			pairs: [beating(4, 3, 881, measured, half), pair(8, 6, 1771)]
		}
	);
}

describe('an interval', () => {
	it('inside: verdict, rate and side in the heading; one place judged, the rest also heard', () => {
		const view = viewOf(fourth(0.91));
		expect(view.headline).toBe('A3–D4 is inside: 0.91 beats per second, wide.');
		expect(view.lead).toBe('The fourth A3 up to D4, through the microphone, heard for 4 seconds.');
		expect(view.judgedTitle).toBe('Judged at A5, where a fourth is counted');
		expect(view.judgement?.verdict).toBe('inside');
		expect(view.others.map((row) => row.group.pitch)).toEqual(['A6']);
		expect(view.recording).toEqual(['38 dB above the room.', 'Nothing in the browser touched it.']);
		expect(view.worthKeeping).toBe(true);
	});

	it('the right rate on the wrong side has its own sentence', () => {
		const view = viewOf(fourth(-0.91));
		expect(view.headline).toBe(
			'A3–D4 is on the wrong side: 0.91 beats per second, narrow instead of wide.'
		);
		expect(view.judgement?.verdict).toBe('outside');
	});

	it('outside and about', () => {
		const found = fourth(3.4, 0.3);
		found.analysis.result.pairs[0].tier = 'about';
		expect(viewOf(found).headline).toBe('A3–D4 is outside: about 3.4 beats per second, wide.');
	});

	it('says when no beat could be measured', () => {
		const found = fourth(0.91);
		found.analysis.result.pairs = [pair(4, 3, 881)];
		const view = viewOf(found);
		expect(view.headline).toBe('A3–D4: no beat can be measured.');
		expect(view.judgement).toBeNull();
		expect(view.judged?.group.first.reason).toContain('too weak');
	});

	it('explains wide here and narrow there', () => {
		const found = fourth(0.91);
		const { result } = found.analysis;
		const low = partialHzFromF1(12, result.notes[0].f1Hz ?? 0, 0.0003);
		const high = partialHzFromF1(9, result.notes[1].f1Hz ?? 0, 0.0003);
		expect(high - low).toBeLessThan(-1);
		result.pairs.push(beating(12, 9, low, low - high, 0.1));
		expect(viewOf(found).closing).toContain('no contradiction');
	});
});

describe('a unison and a note', () => {
	it('a unison is told in cents and beats', () => {
		const view = viewOf(
			finding(
				{ kind: 'unison', highMidi: null },
				{ notes: [note('A3', 220)], pairs: [beating(4, 4, 881, 1.5, 0.05)] }
			)
		);
		expect(view.headline).toBe('A3 is outside: the strings are 2.9 cents apart.');
		expect(view.judgement).toMatchObject({ unit: 'cents', verdict: 'outside' });
	});

	it('a still unison names how far the time can show', () => {
		const reason = 'No beat faster than 0.38 per second in the time heard.';
		const view = viewOf(
			finding(
				{ kind: 'unison', highMidi: null },
				{
					notes: [note('A3', 220)],
					pairs: [pair(4, 4, 881, { verdict: 'still', reason, windowSeconds: [0.1, 3.9] })]
				}
			)
		);
		expect(view.headline).toBe('A3 is still, as far as 4 seconds can show.');
		expect(view.judgement?.verdict).toBe('still');
		// Locked strings do not beat although they differ: the page must not say otherwise.
		expect(view.closing).toContain('further apart');
	});

	it('a note is told by pitch, stiffness and distance from the target', () => {
		const fiveAbove = A3 * 2 ** (5 / 1200);
		const view = viewOf(
			finding(
				{ kind: 'note', highMidi: null },
				{ notes: [note('A3', fiveAbove, 0.00031, { centsFromEqual: -1.34 })], pairs: [] }
			)
		);
		expect(view.headline).toBe(
			`A3 sounds at ${fiveAbove.toFixed(2)} Hz, 1.3 cents below equal temperament.`
		);
		expect(view.judged).toBeNull();
		expect(view.notes[0].lines[0]).toBe('1.3 cents below equal temperament, ± 0.1');
		expect(view.notes[0].lines[1]).toBe('5.0 cents above the medium grand’s target');
		expect(view.notes[0].lines[2]).toBe('Inharmonicity 0.000310, very likely 0.000307 to 0.000313');
	});

	it('a note that sounds like another is asked about, not judged, not kept', () => {
		const found = finding(
			{ kind: 'unison', highMidi: null },
			{ notes: [note('A3', 220)], pairs: [beating(4, 4, 881, 1.5, 0.05)] }
		);
		found.analysis.doubt = 'This sounds like A4. Was it A3 that you struck?';
		const view = viewOf(found);
		expect(view.headline).toBe(found.analysis.doubt);
		expect(view.judged).toBeNull();
		expect(view.judgement).toBeNull();
		expect(view.worthKeeping).toBe(false);
	});

	it('nothing found is not worth keeping', () => {
		const silent = note('A3', 220, 0.0003, {
			f1Hz: null,
			f1Ci95Hz: null,
			inharmonicity: null,
			inharmonicityCi95: null,
			centsFromEqual: null
		});
		const view = viewOf(finding({ kind: 'note', highMidi: null }, { notes: [silent], pairs: [] }));
		expect(view.headline).toBe('A3 was not found in this sound.');
		expect(view.worthKeeping).toBe(false);
	});

	it('says what the recording is worth', () => {
		const found = finding({ kind: 'note', highMidi: null }, { notes: [note('A3', 220)] });
		found.analysis.recording = { ...found.analysis.recording, clipped: true, quiet: true };
		if (found.microphone) found.microphone.autoGainControl = null;
		const said = viewOf(found).recording.join(' ');
		expect(said).toContain('Overdriven');
		expect(said).toContain('Very quiet');
		expect(said).toContain('does not say whether automatic gain is off');
		found.microphone = null;
		expect(viewOf({ ...found, source: 'file' }).recording.join(' ')).toContain('From a file');
	});
});

describe('figures', () => {
	it('carry no more digits than are known', () => {
		expect([rateFigure(0.912), rateFigure(12.84), rateFigure(3.41, true)]).toEqual([
			'0.91',
			'12.8',
			'3.4'
		]);
		expect(wholeHz(1770.6)).toBe('1,771');
		expect([centsFrom(1.34), centsFrom(-0.26), centsFrom(0.01)]).toEqual([
			'1.3 cents above',
			'0.3 cents below',
			'0.0 cents from'
		]);
		expect(stiffnessFigure(0.000314)).toBe('0.00031');
		expect(stiffnessFigure(0.000314, 0.000003)).toBe('0.000314');
		expect([1, 2, 3, 4, 11, 12, 13, 21].map(ordinal).join(' ')).toBe(
			'1st 2nd 3rd 4th 11th 12th 13th 21st'
		);
	});
});
