import { describe, expect, it } from 'vitest';
import { referenceRows } from '../../../tests/support/reference-rows';
import {
	TEMPERAMENT_IDS,
	temperamentName,
	temperamentOffsetCents,
	temperamentOffsets
} from './temperaments';

const PITCH_CLASSES = ['C', 'C#', 'D', 'Eb', 'E', 'F', 'F#', 'G', 'G#', 'A', 'Bb', 'B'];
const TABLE_NAMES: Record<string, string> = {
	equal: 'equal',
	meantone: 'quarter-comma meantone (Eb-G#)',
	pythagorean: 'Pythagorean (Eb-G#)',
	'werckmeister-3': 'Werckmeister III',
	'kirnberger-3': 'Kirnberger III',
	vallotti: 'Vallotti',
	'young-1': 'Young first (1799/1800)',
	'young-2': 'Young second (1800)'
};

const offsetsOf = (id: string) => temperamentOffsets(id) as number[];

describe('temperaments from their chains of fifths', () => {
	it('knows every temperament of the table and no other name', () => {
		expect([...TEMPERAMENT_IDS].sort()).toEqual(Object.keys(TABLE_NAMES).sort());
		expect(temperamentOffsets('constructor')).toBeNull();
		expect(temperamentName('vallotti')).toBe('Vallotti');
		expect(temperamentName('no such')).toBeNull();
		expect(temperamentOffsetCents('no such', 60)).toBeNull();
	});

	it.each(Object.entries(TABLE_NAMES))('%s equals its rows, A = 0 and C = 0', (id, tableName) => {
		const offsets = offsetsOf(id);
		const rows = referenceRows('temperaments').filter((row) => row.temperament === tableName);
		expect(rows.map((row) => row.reference).sort()).toEqual(['A=0', 'C=0']);
		for (const row of rows) {
			const reference = row.reference === 'A=0' ? offsets[9] : offsets[0];
			PITCH_CLASSES.forEach((name, k) => {
				expect(Math.abs(offsets[k] - reference - Number(row[name])), name).toBeLessThan(0.001);
			});
		}
	});

	it.each([
		['tem-017', 'meantone', 0.001],
		['tem-018', 'vallotti', 0.001],
		['tem-019', 'werckmeister-3', 0.001],
		['tem-020', 'kirnberger-3', 0.001],
		// Printed in whole cents.
		['tem-022', 'young-1', 0.25]
	])('published table %s equals %s', (rowId, id, limit) => {
		const row = referenceRows('temperaments').find((entry) => entry.row_id === rowId);
		const offsets = offsetsOf(id);
		const reference = row?.reference === 'A=0' ? offsets[9] : offsets[0];
		PITCH_CLASSES.forEach((name, k) => {
			expect(Math.abs(offsets[k] - reference - Number(row?.[name]))).toBeLessThan(limit);
		});
	});

	// Scale archives and Young 1800 as in the table's sources.
	it.each([
		['werckmeister-3', 390.225],
		['kirnberger-3', 386.314],
		['meantone', 386.314],
		['vallotti', 392.18],
		['young-1', 391.69],
		['equal', 400]
	])('third C–E of %s is %d cents', (id, cents) => {
		const offsets = offsetsOf(id);
		expect(Math.abs(400 + offsets[4] - offsets[0] - cents)).toBeLessThan(0.002);
	});

	it('offset of a note goes by its pitch class', () => {
		expect(temperamentOffsetCents('vallotti', 60)).toBeCloseTo(5.865, 3);
		expect(temperamentOffsetCents('vallotti', 84)).toBe(temperamentOffsetCents('vallotti', 60));
		expect(temperamentOffsetCents('young-2', 69)).toBe(0);
	});
});
