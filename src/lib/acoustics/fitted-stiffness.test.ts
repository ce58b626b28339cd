import { describe, expect, it } from 'vitest';
import { fitStiffness } from './fitted-stiffness';
import { KEYBOARD } from './piano-model';
import { PIANO_SHAPES, shapeInharmonicity } from './piano-shapes';
import { createRandom, normal } from './random';
import { solveStretch } from './target-solver';
import { TARGET_STYLES } from './target-styles';

const style = TARGET_STYLES['four-two'];

/** Root mean square of the difference of two tunings over F3–A4, cents. */
function rms(a: Float64Array, b: Float64Array): number {
	let sum = 0;
	for (let i = 53 - 21; i <= 69 - 21; i += 1) sum += (a[i] - b[i]) ** 2;
	return Math.sqrt(sum / 17);
}

describe('stiffness of a piano from measured notes', () => {
	it('with 5 % noise on every note costs at most 0.2 cents rms in F3–A4, less than unsmoothed', () => {
		const random = createRandom(18);
		for (const shape of PIANO_SHAPES) {
			const truth = KEYBOARD.map((midi) => shapeInharmonicity(shape, midi));
			const target = solveStretch(truth, style);
			let smoothed = 0;
			let raw = 0;
			const runs = 30;
			for (let run = 0; run < runs; run += 1) {
				const noisy = truth.map((value) => value * Math.exp(0.05 * normal(random)));
				const measured = KEYBOARD.map((midi, k) => ({ midi, inharmonicity: noisy[k] }));
				const fitted = fitStiffness(measured, shape.breakMidi) as number[];
				smoothed += rms(solveStretch(fitted, style), target) ** 2 / runs;
				raw += rms(solveStretch(noisy, style), target) ** 2 / runs;
			}
			expect(Math.sqrt(smoothed), shape.id).toBeLessThanOrEqual(0.2);
			expect(Math.sqrt(smoothed)).toBeLessThan(0.6 * Math.sqrt(raw));
		}
	});

	it('eighteen notes, every fifth one and both sides of the break, do as well', () => {
		const random = createRandom(19);
		for (const shape of PIANO_SHAPES) {
			const truth = KEYBOARD.map((midi) => shapeInharmonicity(shape, midi));
			const chosen = KEYBOARD.filter(
				(midi) => midi % 5 === 0 || midi === shape.breakMidi || midi === shape.breakMidi + 1
			);
			expect(chosen.length).toBeLessThanOrEqual(20);
			const measured = chosen.map((midi) => ({
				midi,
				inharmonicity: truth[midi - 21] * Math.exp(0.05 * normal(random))
			}));
			const fitted = fitStiffness(measured, shape.breakMidi) as number[];
			expect(rms(solveStretch(fitted, style), solveStretch(truth, style))).toBeLessThan(0.35);
		}
	});

	it('follows two straight lines in log B with a step between them exactly', () => {
		const truth = (midi: number) =>
			midi <= 45 ? Math.exp(-7 - 0.08 * (midi - 21)) : Math.exp(-8.6 + 0.09 * (midi - 46));
		const measured = [21, 30, 40, 45, 46, 60, 80, 108].map((midi) => ({
			midi,
			inharmonicity: truth(midi)
		}));
		const fitted = fitStiffness(measured, 45) as number[];
		KEYBOARD.forEach((midi, k) => expect(fitted[k] / truth(midi)).toBeCloseTo(1, 4));
	});

	it('says null when there is too little', () => {
		const one = { midi: 60, inharmonicity: 3e-4 };
		expect(fitStiffness([one], null)).toBeNull();
		expect(fitStiffness([one, { midi: 70, inharmonicity: 0 }], null)).toBeNull();
		expect(fitStiffness([one, { midi: 70, inharmonicity: 6e-4 }], 46)).toBeNull();
		expect(fitStiffness([one, { midi: 70, inharmonicity: 6e-4 }], null)).not.toBeNull();
	});
});
