import { describe, expect, it } from 'vitest';
import { referenceRow } from '../../../tests/support/reference-rows';
import { multiply, polynomialRoots, add, type Complex } from './complex';
import { coupledModes, lockingLimitHz, rateHeardHz, uncoupledOmega } from './coupled-strings';
import { pianoModel } from './piano-model';
import { createRandom, uniform } from './random';
import { loudestPartial, unisonAtPartial } from './unison';
import { DB_PER_NEPER } from './units';

/** η of a string that alone decays at D dB/s through a resistive bridge. */
const bridgeOf = (decibelsPerSecond: number): Complex => ({
	re: decibelsPerSecond / DB_PER_NEPER,
	im: 0
});
const omega = (hz: number) => 2 * Math.PI * hz;
const decibels = (modes: ReturnType<typeof coupledModes>) =>
	modes.map((mode) => mode.decayPerSecond * DB_PER_NEPER);

describe('two strings on a resistive bridge, 8 dB/s for one alone (Weinreich 1977 model)', () => {
	const pair = (mistuningHz: number) =>
		coupledModes([omega(440), omega(440 + mistuningHz)], 0, bridgeOf(8));

	it('0.2 Hz apart: no beat, 13.849 and 2.151 dB/s', () => {
		expect(referenceRow('decay-and-coupling', 'dec-010').value).toContain('13.849 and 2.151');
		const modes = pair(0.2);
		expect(decibels(modes)[0]).toBeCloseTo(13.849, 3);
		expect(decibels(modes)[1]).toBeCloseTo(2.151, 3);
		expect(rateHeardHz(modes)).toBe(0);
	});

	it.each([
		['dec-008', 0, 16, 0],
		['dec-009', 0.1, 15.52, 0.48],
		['dec-011', 0.29, 9.174, 6.826]
	])('%s: %d Hz apart they are locked', (_row, mistuning, prompt, after) => {
		const modes = pair(mistuning);
		expect(decibels(modes)[0]).toBeCloseTo(prompt, 3);
		expect(decibels(modes)[1]).toBeCloseTo(after, 3);
		expect(rateHeardHz(modes)).toBe(0);
	});

	it.each([
		['dec-012', 0.3, 0.0636],
		['dec-013', 0.5, 0.405],
		['dec-014', 1, 0.9561]
	])('%s: %d Hz apart they beat', (_row, mistuning, rate) => {
		const modes = pair(mistuning);
		expect(rateHeardHz(modes)).toBeCloseTo(rate, 3);
		for (const decay of decibels(modes)) expect(decay).toBeCloseTo(8, 6);
	});

	it.each([
		['dec-003', 4],
		['dec-004', 8],
		['dec-005', 12],
		['dec-006', 20],
		['dec-007', 40]
	])('%s: locking limit at %d dB/s', (rowId, decay) => {
		const limit = lockingLimitHz(bridgeOf(decay).re);
		expect(limit).toBeCloseTo(Number(referenceRow('decay-and-coupling', rowId).value), 3);
		const rate = (mistuning: number) =>
			rateHeardHz(coupledModes([omega(440), omega(440 + mistuning)], 0, bridgeOf(decay)));
		expect(rate(limit * 0.999)).toBe(0);
		expect(rate(limit * 1.001)).toBeGreaterThan(0);
	});

	it('own loss adds to every mode alike', () => {
		const bare = pair(0.5);
		const lossy = coupledModes([omega(440), omega(440.5)], 1.7, bridgeOf(8));
		lossy.forEach((mode, k) => {
			expect(mode.decayPerSecond).toBeCloseTo(bare[k].decayPerSecond + 1.7, 9);
		});
	});
});

describe('one and three strings', () => {
	it('a string alone sounds at its stated pitch and decays at γ + Re η', () => {
		const bridge = { re: 0.7, im: 0.2 };
		const [mode] = coupledModes([uncoupledOmega(261.63, bridge.im)], 0.3, bridge);
		expect(mode.frequencyRadPerSecond / (2 * Math.PI)).toBeCloseTo(261.63, 9);
		expect(mode.decayPerSecond).toBeCloseTo(1, 12);
		expect(rateHeardHz([mode])).toBe(0);
	});

	it('three equal strings: one prompt mode at 3η, two that stay (row dec-015)', () => {
		const modes = coupledModes([omega(262), omega(262), omega(262)], 0.2, { re: 0.5, im: 0.05 });
		expect(modes[0].decayPerSecond).toBeCloseTo(1.7, 9);
		expect(modes[1].decayPerSecond).toBeCloseTo(0.2, 9);
		expect(modes[2].decayPerSecond).toBeCloseTo(0.2, 9);
		expect(modes[0].excitation.re).toBeCloseTo(3, 9);
		expect(rateHeardHz(modes)).toBe(0);
	});

	it('strings far apart beat as if uncoupled', () => {
		const modes = coupledModes([omega(440), omega(450), omega(450)], 0.2, { re: 0.5, im: 0 });
		expect(rateHeardHz(modes)).toBeCloseTo(10, 2);
	});

	it('eigenvalues satisfy trace, determinant and the equation of motion: 2,000 random cases', () => {
		const random = createRandom(12);
		for (let trial = 0; trial < 2000; trial += 1) {
			const count = 1 + Math.floor(random() * 3);
			const offsets = Array.from({ length: count }, () => uniform(random, -12, 12));
			const bridge = { re: uniform(random, 0.05, 6), im: uniform(random, -1, 1) };
			const modes = coupledModes(
				offsets.map((offset) => 2765 + offset),
				0.4,
				bridge
			);
			expect(modes).toHaveLength(count);
			const trace = modes.reduce((sum, mode) => sum + mode.decayPerSecond, 0);
			expect(trace).toBeCloseTo(count * (0.4 + bridge.re), 7);
			const turn = modes.reduce((sum, mode) => sum + mode.frequencyRadPerSecond - 2765, 0);
			expect(turn).toBeCloseTo(offsets.reduce((a, b) => a + b, 0) - count * bridge.im, 6);
			const excited = modes.reduce((sum, mode) => sum + mode.excitation.re, 0);
			expect(excited).toBeCloseTo(count, 4);
		}
	});

	it('agrees with stepping the equation of motion through time', () => {
		const offsets = [0, 2.2, -3.1];
		const [own, bridge] = [0.3, { re: 0.9, im: 0.15 }];
		const modes = coupledModes(offsets, own, bridge);
		const seconds = 1.5;
		const stepped = integrate(offsets, own, bridge, seconds);
		let sum: Complex = { re: 0, im: 0 };
		for (const mode of modes) {
			const size = Math.exp(-mode.decayPerSecond * seconds);
			const angle = mode.frequencyRadPerSecond * seconds;
			const turned = { re: size * Math.cos(angle), im: size * Math.sin(angle) };
			sum = add(sum, multiply(mode.excitation, turned));
		}
		expect(sum.re).toBeCloseTo(stepped.re, 6);
		expect(sum.im).toBeCloseTo(stepped.im, 6);
	});

	it('refuses no strings and four', () => {
		expect(() => coupledModes([], 0, { re: 1, im: 0 })).toThrow(RangeError);
		expect(() => coupledModes([1, 2, 3, 4], 0, { re: 1, im: 0 })).toThrow(RangeError);
	});
});

/** Fourth-order Runge–Kutta on a_s' = (iω_s − γ)a_s − η·Σa; returns Σa. */
function integrate(offsets: number[], own: number, bridge: Complex, seconds: number): Complex {
	const slope = (state: Complex[]): Complex[] => {
		const sum = state.reduce((total, a) => add(total, a), { re: 0, im: 0 });
		const pull = multiply(bridge, sum);
		return state.map((a, s) => ({
			re: -own * a.re - offsets[s] * a.im - pull.re,
			im: -own * a.im + offsets[s] * a.re - pull.im
		}));
	};
	const moved = (state: Complex[], by: Complex[], dt: number) =>
		state.map((a, s) => ({ re: a.re + dt * by[s].re, im: a.im + dt * by[s].im }));
	let state: Complex[] = offsets.map(() => ({ re: 1, im: 0 }));
	const steps = 3000;
	const dt = seconds / steps;
	for (let step = 0; step < steps; step += 1) {
		const k1 = slope(state);
		const k2 = slope(moved(state, k1, dt / 2));
		const k3 = slope(moved(state, k2, dt / 2));
		const k4 = slope(moved(state, k3, dt));
		state = state.map((a, s) => ({
			re: a.re + (dt / 6) * (k1[s].re + 2 * k2[s].re + 2 * k3[s].re + k4[s].re),
			im: a.im + (dt / 6) * (k1[s].im + 2 * k2[s].im + 2 * k3[s].im + k4[s].im)
		}));
	}
	return state.reduce((total, a) => add(total, a), { re: 0, im: 0 });
}

describe('roots of polynomials', () => {
	it('finds known roots of degree 1, 2 and 3', () => {
		const [a, b, c]: Complex[] = [
			{ re: 1, im: 2 },
			{ re: -3, im: 0.5 },
			{ re: 0.1, im: -4 }
		];
		const negative = (z: Complex) => ({ re: -z.re, im: -z.im });
		const cubic = [
			negative(multiply(multiply(a, b), c)),
			add(add(multiply(a, b), multiply(b, c)), multiply(a, c)),
			negative(add(add(a, b), c))
		];
		const found = polynomialRoots(cubic).sort((x, y) => x.re - y.re);
		[b, c, a].forEach((root, k) => {
			expect(found[k].re).toBeCloseTo(root.re, 10);
			expect(found[k].im).toBeCloseTo(root.im, 10);
		});
		expect(polynomialRoots([{ re: -2, im: 1 }])).toEqual([{ re: 2, im: -1 }]);
	});
});

describe('a unison of a piano', () => {
	const piano = pianoModel('medium-grand');

	it('beats at the string difference when far apart, less and less when near, then locks', () => {
		const f1Hz = 220;
		const rate = (cents: number) =>
			unisonAtPartial(piano, 57, 2, [f1Hz, f1Hz * 2 ** (cents / 1200)]).rateHz;
		const apart = (cents: number) => 440 * (2 ** (cents / 1200) - 1);
		expect(rate(20) / apart(20)).toBeGreaterThan(0.99);
		expect(rate(2)).toBeGreaterThan(0);
		expect(rate(2)).toBeLessThan(apart(2));
		expect(rate(0.2)).toBe(0);
		expect(unisonAtPartial(piano, 57, 2, [f1Hz, f1Hz * 1.0001]).locked).toBe(true);
		expect(unisonAtPartial(piano, 57, 2, [f1Hz, f1Hz]).locked).toBe(false);
	});

	it('tells the loudest partial by the tone itself', () => {
		for (const midi of [33, 57, 69, 84]) {
			const loudest = loudestPartial(piano, midi);
			const levels = Array.from({ length: 40 }, (_, k) => piano.tone(midi, k + 1, 0.6).amplitude);
			expect(levels[loudest - 1]).toBe(Math.max(...levels));
		}
	});
});
