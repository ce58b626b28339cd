import { describe, expect, it } from 'vitest';
import { referenceRow, referenceRows } from '../../../tests/support/reference-rows';
import {
	f1HzFromPartial,
	flexibleFundamentalHz,
	inharmonicityFromStretch,
	inharmonicityOfPlainWire,
	partialHz,
	partialHzFromF1,
	partialStretchCents,
	tensionOfPlainWire
} from './stiff-string';
import { centsBetween } from './units';

const NEWTON_PER_POUND_FORCE = 4.4482216;
const NEWTON_PER_KILOGRAM_FORCE = 9.80665;

describe('partials of a stiff string', () => {
	it('is harmonic without stiffness, exactly', () => {
		for (let n = 1; n <= 40; n += 1) expect(partialHzFromF1(n, 220, 0)).toBe(n * 220);
	});

	it('states the first partial exactly, whatever B', () => {
		expect(partialHzFromF1(1, 261.63, 3.4e-4)).toBeCloseTo(261.63, 12);
		const f0Hz = flexibleFundamentalHz(261.63, 3.4e-4);
		expect(partialHz(7, f0Hz, 3.4e-4)).toBeCloseTo(partialHzFromF1(7, 261.63, 3.4e-4), 9);
		expect(f1HzFromPartial(7, partialHzFromF1(7, 261.63, 3.4e-4), 3.4e-4)).toBeCloseTo(261.63, 9);
	});

	it('Young 1952: the second partial of C4 is 1.2 cents sharp of twice f0', () => {
		const row = referenceRow('inharmonicity', 'inh-006');
		const inharmonicity = Number(referenceRow('inharmonicity', 'inh-008').value);
		const cents = centsBetween(partialHz(2, 1, inharmonicity), 2);
		expect(Math.abs(cents - Number(row.value))).toBeLessThan(0.01);
		expect(partialStretchCents(2, inharmonicity)).toBeCloseTo(cents * (3 / 4), 2);
	});

	it('Young 1952: B doubles every eight semitones, to C6', () => {
		const c4 = Number(referenceRow('inharmonicity', 'inh-008').value);
		const c6 = Number(referenceRow('inharmonicity', 'inh-012').value);
		expect(c6 / (c4 * 2 ** (24 / 8))).toBeCloseTo(1, 3);
	});

	it('Young 1952: B of plain wire agrees with his constant 3.4e13', () => {
		// b in cents per n² = 3.4e13·d²/(f²·l⁴), d and l in cm.
		const wire = { lengthM: 0.62, diameterM: 1.014e-3, f0Hz: 262.19 };
		const young = (3.4e13 * 0.1014 ** 2) / (wire.f0Hz ** 2 * 62 ** 4);
		const ours = partialStretchCents(2, inharmonicityOfPlainWire(wire)) / 3;
		expect(ours / young).toBeCloseTo(1, 2);
	});

	it('Schuck & Young 1943: 15th partial at the 16th harmonic', () => {
		expect(Math.abs(inharmonicityFromStretch(15, 16 / 15) - 6.123e-4)).toBeLessThan(1e-6);
		const fromF1 = inharmonicityFromStretch(15, 16 / 15, 'f1');
		expect(Math.abs(fromF1 - 6.155e-4)).toBeLessThan(1e-6);
		expect(partialHzFromF1(15, 27.5, fromF1)).toBeCloseTo(16 * 27.5, 9);
		expect(inharmonicityFromStretch(2, 3, 'f1')).toBeNaN();
	});

	it('octave types of A3–A4 widen in order: 2:1, 4:2, 6:3', () => {
		const [lowB, highB] = [2.389e-4, 7.559e-4];
		for (const [rowId, p] of [
			['inh-055', 2],
			['inh-056', 4],
			['inh-057', 6]
		] as const) {
			const width = 1200 + partialStretchCents(p, lowB) - partialStretchCents(p / 2, highB);
			expect(width).toBeCloseTo(Number(referenceRow('inharmonicity', rowId).value), 2);
		}
	});
});

describe('plain wire', () => {
	const strings = referenceRows('string-data').filter(
		(row) => row.kind.startsWith('string') && row.tension_N !== ''
	);

	it('has eighteen strings to check against', () => {
		expect(strings).toHaveLength(18);
	});

	it.each(strings.map((row) => [row.row_id, row.note, row] as const))(
		'%s %s: tension as published',
		(_id, _note, row) => {
			const density = Number.parseFloat(row.density_kg_m3);
			const tension = tensionOfPlainWire({
				lengthM: Number(row.length_m),
				diameterM: Number(row.diameter_mm) / 1000,
				f0Hz: Number(row.freq_hz),
				densityKgPerM3: Number.isFinite(density) ? density : undefined
			});
			// Lengths of the short treble strings are rounded to 1 mm: 1.3 %.
			const limit = Number(row.length_m) < 0.2 ? 0.014 : 0.0035;
			expect(Math.abs(tension / Number(row.tension_N) - 1)).toBeLessThan(limit);
		}
	);

	it('C#5 wires of Brougher 1996 in pounds, F3 in kilograms', () => {
		const poundsOf = (diameterIn: number) =>
			tensionOfPlainWire({
				lengthM: 14 * 0.0254,
				diameterM: diameterIn * 0.0254,
				f0Hz: 554.37
			}) / NEWTON_PER_POUND_FORCE;
		expect(Math.abs(poundsOf(0.033) / 151 - 1)).toBeLessThan(0.005);
		expect(Math.abs(poundsOf(0.039) / 211 - 1)).toBeLessThan(0.005);
		const f3 = tensionOfPlainWire({
			lengthM: 0.972,
			diameterM: 1.09e-3,
			f0Hz: 174.61,
			densityKgPerM3: 7900
		});
		expect(Math.abs(f3 / NEWTON_PER_KILOGRAM_FORCE / 86.583 - 1)).toBeLessThan(0.001);
	});

	it('B from string data as computed in the table, E = 200 GPa', () => {
		for (const rowId of ['inh-026', 'inh-027', 'inh-028', 'inh-029']) {
			const row = referenceRow('inharmonicity', rowId);
			const [, length, diameter, tension] =
				/L=([\d.]+) m, d=([\d.]+) mm, T=([\d.]+) N/.exec(row.notes) ?? [];
			const inharmonicity = inharmonicityOfPlainWire({
				lengthM: Number(length),
				diameterM: Number(diameter) / 1000,
				tensionN: Number(tension),
				youngModulusPa: 200e9
			});
			expect(inharmonicity / Number(row.value)).toBeCloseTo(1, 3);
		}
	});

	it('a semitone is 12.246 % of tension', () => {
		const wire = { lengthM: 0.62, diameterM: 1e-3 };
		const ratio =
			tensionOfPlainWire({ ...wire, f0Hz: 2 ** (1 / 12) }) /
			tensionOfPlainWire({ ...wire, f0Hz: 1 });
		expect((ratio - 1) * 100).toBeCloseTo(12.2462, 4);
	});
});
