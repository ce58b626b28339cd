import { describe, expect, it } from 'vitest';
import { equalTemperamentHz } from '../../acoustics/units';
import { addSines, createUniform, stiffTone } from '../testing/signals';
import { coincidencesOf } from './coincidences';
import { measureClip } from './measure-clip';

const RATE = 48000;
const INHARMONICITY = 2e-4;

function tone(hz: number[], seconds: number, seed: number, snrDb?: number): Float32Array {
	const strings = hz.map((f1Hz) => ({ f1Hz, inharmonicity: INHARMONICITY }));
	return stiffTone({ sampleRateHz: RATE, seconds, strings, seed, snrDb, atSeconds: 0.1 });
}

describe('a single string', () => {
	it.each([
		[0, 0.01],
		[1.5, 0.05]
	])('that glides by %d cents rarely seems to beat', (glideCents, bar) => {
		const uniform = createUniform(93);
		let asked = 0;
		let beating = 0;
		for (let seed = 1; seed <= 12; seed++) {
			const midi = 36 + Math.floor(36 * uniform());
			const strings = [{ f1Hz: equalTemperamentHz(midi), inharmonicity: INHARMONICITY }];
			const glideSeconds = [0.12, 0.35, 1][seed % 3];
			const samples = stiffTone({
				...{ sampleRateHz: RATE, seconds: 4, strings, seed, snrDb: 50 },
				...{ glideCents, glideSeconds, atSeconds: 0.1 }
			});
			for (const { verdict } of measureClip(samples, RATE, { kind: 'unison', notes: [midi] })
				.pairs) {
				asked++;
				if (verdict === 'beating') beating++;
			}
		}
		expect(asked).toBeGreaterThan(90);
		expect(beating / asked).toBeLessThanOrEqual(bar);
	});
});

describe('a short or noisy window', () => {
	it('gives no rate outside the limits of its tier', () => {
		let answered = 0;
		for (let seed = 1; seed <= 6; seed++) {
			const rate = 0.25 * seed;
			const samples = tone([220, 220 + rate], 2.6, seed, 15);
			const { pairs } = measureClip(samples, RATE, { kind: 'unison', notes: [57] });
			for (const { verdict, beatRateHz, lowerPartial, ci95Hz, tier } of pairs) {
				if (verdict !== 'beating') continue;
				answered++;
				const truth = rate * lowerPartial;
				const share = tier === 'firm' ? 0.05 : 0.1;
				const least = tier === 'firm' ? 0.1 : 0.15;
				expect(Math.abs(beatRateHz! - truth)).toBeLessThanOrEqual(Math.max(share * truth, least));
				expect(ci95Hz![1]).toBeGreaterThan(ci95Hz![0]);
			}
		}
		expect(answered).toBeGreaterThan(5);
	});

	it('names a limit of still that a true rate does not exceed', () => {
		for (const apart of [0.02, 0.06, 0.12]) {
			const samples = tone([220, 220 + apart, 220 + 2.2 * apart], 2.6, 5, 30);
			const { pairs } = measureClip(samples, RATE, { kind: 'unison', notes: [57] });
			for (const { verdict, reason, lowerPartial } of pairs) {
				if (verdict !== 'still') continue;
				const limit = Number(/faster than ([\d.]+)/.exec(reason ?? '')?.[1]);
				expect(apart * lowerPartial).toBeLessThanOrEqual(limit);
			}
		}
	});
});

describe('what was named', () => {
	it.each([48, 45, 64, 69])('a note A3 named %d gives no reading and says what it is', (named) => {
		const samples = tone([220, 220.6], 3, 7, 40);
		const { notes, pairs, advice } = measureClip(samples, RATE, { kind: 'note', notes: [named] });
		expect(notes[0].f1Hz).toBeNull();
		expect(notes[0].inharmonicity).toBeNull();
		expect(advice.join(' ')).toMatch(/sounds like A3/);
		for (const { verdict } of pairs) expect(verdict).toBe('not-measurable');
	});

	it('an interval of which one note is silent', () => {
		const samples = tone([220], 3, 8, 40);
		const { notes, advice } = measureClip(samples, RATE, { kind: 'interval', notes: [57, 64] });
		expect(notes[1].f1Hz).toBeNull();
		expect(advice.join(' ')).toMatch(/E4 was not found/);
	});

	it('a fork has a pitch and no stiffness', () => {
		const samples = new Float32Array(3 * RATE);
		const sine = { hz: 440.3, amplitude: 0.3, decayPerSecond: 0.35, phase: 0 };
		addSines(samples, RATE, [sine], 0.1);
		const { notes, advice, pairs } = measureClip(samples, RATE, { kind: 'note', notes: [69] });
		expect(Math.abs(notes[0].f1Hz! - 440.3)).toBeLessThan(0.02);
		expect(notes[0].inharmonicity).toBeNull();
		expect(advice.join(' ')).toMatch(/stiffness/);
		expect(pairs[0].verdict).toBe('still');
	});
});

describe('intervals without a name of their own', () => {
	it('meet where simple ratios lie near', () => {
		const at = (semitones: number) =>
			coincidencesOf(57, 57 + semitones).map((p) => `${p.lowerPartial}:${p.upperPartial}`);
		expect(at(6)).toEqual(['7:5', '10:7', '14:10']);
		expect(at(2)[0]).toBe('9:8');
		expect(at(11)).toEqual(['15:8']);
		expect(at(36)[0]).toBe('8:1');
		expect(at(60)).toEqual([]);
		expect(at(7)[0]).toBe('3:2');
	});

	it('say so when nothing meets', () => {
		const samples = tone([65.4], 2, 9, 40);
		const { pairs, advice } = measureClip(samples, RATE, { kind: 'interval', notes: [36, 96] });
		expect(pairs).toEqual([]);
		expect(advice.join(' ')).toMatch(/no beat to measure/);
	});
});
