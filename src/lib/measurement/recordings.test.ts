import { readFile } from 'node:fs/promises';
import path from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { midiFromNoteName, noteName } from '../acoustics/units';
import { decodeAudio } from './decode';
import { detectNote, tonePeaks } from './dsp/note-finder';
import { findStrike } from './dsp/strike';
import {
	noteErrors,
	scoreRecordings,
	type Outcome,
	type ScoredClip,
	type ScoredRow
} from './testing/recordings-score';

// Real recordings: fixtures/recordings (source, licence and how the reference was made in its
// README). Values are asserted only on rows of confidence A (intervals also B).
const FOLDER = path.resolve(import.meta.dirname, '../../../fixtures/recordings');

describe('real recordings', () => {
	let clips: ScoredClip[] = [];
	const rows = (kind: string, classes: string[], confidence: string): ScoredRow[] =>
		clips
			.filter((clip) => clip.kind === kind)
			.flatMap((clip) => clip.rows)
			.filter(({ row }) => classes.includes(row.class) && confidence.includes(row.confidence));
	const share = (of: ScoredRow[], outcome: Outcome): number =>
		of.filter((row) => row.outcome === outcome).length / of.length;

	beforeAll(async () => {
		clips = await scoreRecordings(FOLDER);
	}, 120_000);

	it('are all there', () => {
		expect(clips).toHaveLength(28);
		expect(clips.flatMap((clip) => clip.rows)).toHaveLength(150);
	});

	it('let the note be found in every single-note clip', async () => {
		for (const clip of clips.filter(({ kind }) => kind === 'note')) {
			const { samples, sampleRateHz } = await decodeAudio(
				await readFile(path.join(FOLDER, clip.file))
			);
			const strike = findStrike(samples, sampleRateHz)!;
			const peaks = tonePeaks(samples, sampleRateHz, strike);
			const midi = detectNote(samples, sampleRateHz, strike, peaks);
			expect(midi && noteName(midi), clip.file).toBe(clip.truth.notes[0]);
			expect(clip.result.notes[0].note).toBe(noteName(midiFromNoteName(clip.truth.notes[0])!));
		}
	});

	it('give f0 within 2.5 cents and B within 10 % in at least 95 % of single notes A2 to C5', () => {
		const notes = clips.filter(({ kind }) => kind === 'note');
		const errors = notes.map((clip) => noteErrors(clip.truth, clip.result.notes[0]));
		const right = errors.filter(
			(e) => e && Math.abs(e.f0Cents) <= 2.5 && Math.abs(e.inharmonicityShare) <= 0.1
		);
		expect(notes.length).toBeGreaterThanOrEqual(12);
		expect(right.length / notes.length).toBeGreaterThanOrEqual(0.95);
	});

	it('intervals of confidence A: at least three of four right and none wrong', () => {
		const sure = rows('interval', ['beat'], 'A');
		expect(sure).toHaveLength(4);
		expect(sure.filter(({ outcome }) => outcome === 'right').length).toBeGreaterThanOrEqual(3);
		expect(share(sure, 'wrong')).toBe(0);
		const all = rows('interval', ['beat'], 'AB');
		expect(share(all, 'right')).toBeGreaterThanOrEqual(0.7);
		expect(share(all, 'wrong')).toBeLessThanOrEqual(0.1);
	});

	it('shifted copies of confidence A: at least 90 % right, at most 3 % wrong', () => {
		const shifts = rows('shift', ['beat'], 'A');
		expect(shifts).toHaveLength(17);
		expect(share(shifts, 'right')).toBeGreaterThanOrEqual(0.9);
		expect(share(shifts, 'wrong')).toBeLessThanOrEqual(0.03);
	});

	it('single notes of confidence A: at least half right, at most 10 % wrong', () => {
		const notes = rows('note', ['beat'], 'A');
		expect(notes).toHaveLength(7);
		expect(share(notes, 'right')).toBeGreaterThanOrEqual(0.5);
		expect(share(notes, 'wrong')).toBeLessThanOrEqual(0.1);
	});

	it('slow rows of confidence A: at least 96 % without a rate above their limit', () => {
		const slow = rows('note', ['slow', 'none'], 'A');
		expect(slow).toHaveLength(25);
		expect(share(slow, 'right')).toBeGreaterThanOrEqual(0.96);
	});

	it('intervals of the rates cover the reference in 85 %, overlap its limits in 95 %', () => {
		const rated = ['note', 'shift', 'interval']
			.flatMap((kind) => rows(kind, ['beat'], 'AB'))
			.filter(({ pair }) => pair?.verdict === 'beating');
		const inside = rated.filter(({ row, pair }) => {
			const [low, high] = pair!.ci95Hz!;
			return low <= row.beatHz! && row.beatHz! <= high;
		});
		const overlapping = rated.filter(({ row, pair }) => {
			const [low, high] = pair!.ci95Hz!;
			return low <= row.beatHz! + row.tolHz! && row.beatHz! - row.tolHz! <= high;
		});
		expect(rated.length).toBeGreaterThan(30);
		expect(inside.length / rated.length).toBeGreaterThanOrEqual(0.85);
		expect(overlapping.length / rated.length).toBeGreaterThanOrEqual(0.95);
	});

	it('never give a wrong answer in the first 4 s on rows of confidence A', async () => {
		const short = (await scoreRecordings(FOLDER, '', 4)).flatMap((clip) => clip.rows);
		const sure = short.filter(({ row }) => row.confidence === 'A');
		const wrong = sure.filter(({ outcome }) => outcome === 'wrong');
		expect(wrong.map(({ row }) => `${row.file} ${row.lowerPartial}`)).toEqual([]);
		const right = (kind: string): ScoredRow[] =>
			sure.filter(
				({ row, outcome }) => row.kind === kind && row.class === 'beat' && outcome === 'right'
			);
		expect(right('interval').length).toBeGreaterThanOrEqual(3);
		expect(right('shift').length).toBeGreaterThanOrEqual(15);
	}, 120_000);

	it('never call an interval still', () => {
		for (const clip of clips.filter(({ kind }) => kind === 'interval')) {
			for (const pair of clip.result.pairs) expect(pair.verdict, clip.file).not.toBe('still');
		}
	});
});
