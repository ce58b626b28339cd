import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { midiFromNoteName } from '../acoustics/units';
import { analyseFile } from './analysis';
import { decodeAudio } from './decode';
import { findStrike } from './dsp/strike';
import { noteDoubt } from './note-doubt';

const CLIPS = new URL('../../../fixtures/recordings/', import.meta.url);
const bytesOf = (name: string) => new Uint8Array(readFileSync(new URL(`${name}.flac`, CLIPS)));

describe('analysis of a file', () => {
	it('measures, says what the recording is worth, and draws a shore for each pair', async () => {
		const { result, recording, shores, sampleRateHz } = await analyseFile(
			bytesOf('grand-one-a3c4-m3-v10-l'),
			{ kind: 'interval', notes: [57, 60], seconds: 4 }
		);
		expect(sampleRateHz).toBe(48_000);
		expect(result.notes.map((n) => n.note)).toEqual(['A3', 'C4']);
		expect(recording.clipped).toBe(false);
		const places = new Set(result.pairs.map((p) => `${p.lowerPartial}:${p.upperPartial}`));
		expect(shores.map((s) => `${s.lowerPartial}:${s.upperPartial}`)).toEqual([...places]);
		for (const { timesS, levelDb } of shores) {
			expect(levelDb.length).toBe(timesS.length);
			expect(timesS.at(-1)).toBeGreaterThan(3.9);
			expect(timesS.at(-1)).toBeLessThanOrEqual(4.01);
			expect(levelDb.every(Number.isFinite)).toBe(true);
		}
		// Reference: truth.csv, grand-one-a3c4-m3-v10-l, 6:5, 13.15 b/s in the first 2.5 s.
		expect(result.pairs[0]).toMatchObject({ lowerPartial: 6, upperPartial: 5, verdict: 'beating' });
		expect(Math.abs((result.pairs[0].beatRateHz ?? 0) - 13.15)).toBeLessThan(0.3);
	});
});

describe('a wrongly named note', () => {
	const singles = readdirSync(CLIPS)
		.map((file) => /^(grand-(?:one|two)-([a-g]\d)-(?:v\d+|mf|ff)-[lr])\.flac$/.exec(file))
		.filter((match) => match !== null)
		.map(([, name, note]) => ({ name, midi: midiFromNoteName(note) ?? 0 }));

	it('is doubted, a rightly named one is not, in all clips of one note', async () => {
		expect(singles.length).toBeGreaterThanOrEqual(10);
		for (const { name, midi } of singles) {
			const { samples, sampleRateHz } = await decodeAudio(bytesOf(name));
			const strike = findStrike(samples, sampleRateHz);
			if (!strike) throw new Error(`no strike in ${name}`);
			expect(noteDoubt(samples, sampleRateHz, strike, midi), name).toBeNull();
			for (const wrong of [midi - 9, midi + 1, midi + 12]) {
				expect(noteDoubt(samples, sampleRateHz, strike, wrong), name).toMatch(/^This sounds like/);
			}
		}
	});
});
