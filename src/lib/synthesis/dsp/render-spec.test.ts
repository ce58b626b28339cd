import { readFileSync, readdirSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { SpecError, parseRenderSpec } from '../../acoustics/render-spec';
import { solveTargets } from '../../acoustics/targets';
import { pianoModel } from '../../acoustics/piano-model';
import { fitPoles } from '../testing/tone-fit';
import { rootMeanSquare } from './noise';
import { renderSpec } from './render-spec';

/** A golden render: a specification, and what must be found in its samples. */
interface Golden {
	about: string;
	source: string;
	spec: unknown;
	bands: {
		centreHz: number;
		fromSeconds: number;
		toSeconds: number;
		windowSeconds: number;
		/** Frequency in Hz and decay in 1/s of each component. */
		components: { frequencyHz: number; decayPerSecond: number }[];
		toleranceHz: number;
	}[];
}

const GOLDEN = new URL('../../../../fixtures/golden/', import.meta.url);
const goldens = readdirSync(GOLDEN)
	.filter((name) => name.endsWith('.json'))
	.map(
		(name) => [name, JSON.parse(readFileSync(new URL(name, GOLDEN), 'utf8')) as Golden] as const
	);

describe('golden renders, measured', () => {
	it('are there', () => expect(goldens.length).toBeGreaterThanOrEqual(5));

	it.each(goldens)('%s', (_name, golden) => {
		const spec = parseRenderSpec(golden.spec);
		const samples = renderSpec(spec);
		for (const band of golden.bands) {
			const order = band.components.length;
			const poles = fitPoles(samples, spec.sampleRateHz, band.centreHz, order, {
				...band,
				rateHz: 50
			});
			band.components.forEach((component, k) => {
				expect(Math.abs(poles[k].frequencyHz - component.frequencyHz)).toBeLessThan(
					band.toleranceHz
				);
				expect(Math.abs(poles[k].decayPerSecond - component.decayPerSecond)).toBeLessThan(
					4 * Math.PI * band.toleranceHz
				);
			});
		}
	});
});

const strike = { note: 'A3', strings: [{ cents: 0 }, { cents: 1.5 }] };

describe('renderSpec', () => {
	it('gives the same samples for the same specification', () => {
		const noise = { snrDb: 30, colour: 'pink', seed: 5 };
		const spec = parseRenderSpec({ seconds: 0.5, strikes: [strike], noise });
		const first = renderSpec(spec);
		expect(renderSpec(spec).every((x, t) => x === first[t])).toBe(true);
	});

	it('takes cents from the target tuning of the piano', () => {
		const spec = parseRenderSpec({
			seconds: 3,
			piano: 'short-upright',
			strikes: [{ note: 'A2', strings: [{ cents: 5 }] }]
		});
		const target = solveTargets(pianoModel('short-upright')).f1Hz(45) * 2 ** (5 / 1200);
		const [pole] = fitPoles(renderSpec(spec), 48_000, 110, 1, {
			fromSeconds: 0.1,
			toSeconds: 3,
			windowSeconds: 0.3,
			rateHz: 50
		});
		expect(Math.abs(pole.frequencyHz - target)).toBeLessThan(1e-3);
	});

	it.each([
		[20, 'white'],
		[-10, 'pink']
	] as const)('lays noise %f dB under the tone (%s)', (snrDb, colour) => {
		const spec = { seconds: 1, strikes: [strike] };
		const clean = renderSpec(parseRenderSpec(spec));
		const noisy = renderSpec(parseRenderSpec({ ...spec, noise: { snrDb, colour, seed: 2 } }));
		// The clip may have been turned down as a whole: find the share of the tone in it first.
		const share =
			noisy.reduce((sum, x, t) => sum + x * clean[t], 0) / clean.reduce((sum, x) => sum + x * x, 0);
		const noise = noisy.map((x, t) => x - share * clean[t]);
		const found = 20 * Math.log10((share * rootMeanSquare(clean)) / rootMeanSquare(noise));
		expect(Math.abs(found - snrDb)).toBeLessThan(0.3);
		expect(noisy.every((x) => Math.abs(x) <= 1)).toBe(true);
	});

	it('starts each strike on its sample and is silent before', () => {
		const spec = parseRenderSpec({
			seconds: 1,
			strikes: [{ ...strike, atSeconds: 0.5 }]
		});
		const samples = renderSpec(spec);
		expect(samples.subarray(0, 24_000).every((x) => x === 0)).toBe(true);
		expect(rootMeanSquare(samples.subarray(24_000, 24_480))).toBeGreaterThan(0.005);
	});

	it('refuses a pitch that the sample rate cannot carry', () => {
		const high = { note: 'C8', strings: [{ hz: 4200 }] };
		const spec = parseRenderSpec({ seconds: 1, sampleRateHz: 8000, strikes: [high] });
		expect(() => renderSpec(spec)).toThrow(SpecError);
	});
});
