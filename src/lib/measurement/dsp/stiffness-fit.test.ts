import { describe, expect, it } from 'vitest';
import { equalTemperamentHz, noteName } from '../../acoustics/units';
import { searchComb } from './comb';
import { detectNote, findNote, fitNote, tonePeaks } from './note-finder';
import { fitStiffness, type PartialReading } from './stiffness-fit';
import { findStrike } from './strike';
import { createNoise, createUniform, stiffTone } from '../testing/signals';

const RATE = 48000;

describe('fit of f0 and B', () => {
	it('is exact without error and shrugs off two false partials', () => {
		for (const inharmonicity of [0, 5e-5, 3e-4, 2e-3]) {
			const readings: PartialReading[] = [];
			for (let n = 1; n <= 14; n++) {
				const off = n === 5 ? 4 : n === 9 ? -6 : 0;
				const frequencyHz = n * 196 * Math.sqrt(1 + inharmonicity * n * n) + off;
				readings.push({ n, frequencyHz, levelDb: -20 });
			}
			const fit = fitStiffness(readings)!;
			expect(fit.f0Hz).toBeCloseTo(196, 3);
			expect(Math.abs(fit.inharmonicity - inharmonicity)).toBeLessThan(2e-7);
		}
	});

	it('states standard deviations that the errors keep to', () => {
		const normal = createNoise(31);
		let inside = 0;
		const trials = 200;
		for (let trial = 0; trial < trials; trial++) {
			const readings: PartialReading[] = [];
			for (let n = 1; n <= 16; n++) {
				const exact = n * 220 * Math.sqrt(1 + 2e-4 * n * n);
				const sd = Math.hypot(0.1, 1e-4 * exact);
				readings.push({ n, frequencyHz: exact + sd * normal(), levelDb: -20 });
			}
			const fit = fitStiffness(readings)!;
			if (Math.abs(fit.inharmonicity - 2e-4) <= 2 * fit.inharmonicitySd) inside++;
		}
		expect(inside / trials).toBeGreaterThan(0.9);
	});

	it('needs three partials', () => {
		expect(fitStiffness([{ n: 1, frequencyHz: 100, levelDb: 0 }])).toBeNull();
	});
});

describe('finding a note', () => {
	it('finds named single strings: f1 within 0.2 cents, B within 2 %', () => {
		const uniform = createUniform(41);
		for (const midi of [33, 40, 45, 52, 57, 60, 64, 69, 72]) {
			const inharmonicity = 10 ** (-4.2 + 0.03 * (midi - 33));
			const f1Hz = equalTemperamentHz(midi) * 2 ** ((50 * uniform() - 25) / 1200);
			const samples = stiffTone({
				sampleRateHz: RATE,
				seconds: 3,
				strings: [{ f1Hz, inharmonicity }],
				seed: midi,
				snrDb: 40,
				atSeconds: 0.2
			});
			const peaks = tonePeaks(samples, RATE, findStrike(samples, RATE)!);
			const fit = fitNote(peaks, findNote(peaks, midi, RATE)!, RATE)!;
			expect(Math.abs(1200 * Math.log2(fit.f1Hz / f1Hz))).toBeLessThan(0.2);
			expect(Math.abs(fit.inharmonicity / inharmonicity - 1)).toBeLessThan(0.02);
		}
	});

	it('names every third note from E1 to C6', () => {
		const missed: string[] = [];
		for (let midi = 28; midi <= 84; midi += 3) {
			const samples = stiffTone({
				sampleRateHz: 44100,
				seconds: 2,
				strings: [
					{ f1Hz: equalTemperamentHz(midi), inharmonicity: 2e-4 },
					{ f1Hz: equalTemperamentHz(midi) * 1.0006, inharmonicity: 2e-4 }
				],
				seed: midi,
				snrDb: 30,
				atSeconds: 0.1
			});
			const strike = findStrike(samples, 44100)!;
			const found = detectNote(samples, 44100, strike, tonePeaks(samples, 44100, strike));
			if (found !== midi) missed.push(noteName(midi));
		}
		expect(missed).toEqual([]);
	});

	it('finds no comb without peaks', () => {
		const range = { lowF1Hz: 200, highF1Hz: 230, highestHz: 9000, maxPartials: 16 };
		expect(searchComb([], range)).toBeNull();
		expect(findNote([], 57, RATE)).toBeNull();
	});
});
