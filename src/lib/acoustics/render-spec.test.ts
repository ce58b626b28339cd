import { describe, expect, it } from 'vitest';
import { SpecError, parseRenderSpec } from './render-spec';

const EXAMPLE = {
	sampleRateHz: 48000,
	seconds: 8,
	piano: 'medium-grand',
	strikes: [
		{ note: 'A3', atSeconds: 0, velocity: 0.6, strings: [{ cents: 0 }, { cents: 1.5 }] },
		{ fork: { hz: 440 }, atSeconds: 0, velocity: 0.6 }
	],
	coupling: true,
	noise: null
};
const strike = EXAMPLE.strikes[0];

describe('specification of a rendering', () => {
	it('reads the whole form and fills in what may be left out', () => {
		expect(parseRenderSpec(EXAMPLE)).toEqual({
			...EXAMPLE,
			format: 'float32',
			temperament: 'equal',
			style: 'four-two'
		});
		expect(parseRenderSpec({ seconds: 1, strikes: [{ note: 'Bb3' }] })).toEqual({
			sampleRateHz: 48000,
			seconds: 1,
			piano: 'medium-grand',
			strikes: [{ note: 'Bb3', atSeconds: 0, velocity: 0.6, strings: [{ cents: 0 }] }],
			coupling: true,
			noise: null,
			format: 'float32',
			temperament: 'equal',
			style: 'four-two'
		});
	});

	it('takes strings in hertz, noise, inline pianos, 0, temperament and style', () => {
		const spec = parseRenderSpec({
			...EXAMPLE,
			piano: { inharmonicity: { A3: 3e-4 } },
			strikes: [{ ...strike, strings: [{ hz: 220.5 }] }],
			noise: { snrDb: 30, colour: 'pink', seed: 1 },
			format: 'int16',
			temperament: 'vallotti',
			style: 'two-one'
		});
		expect(spec.noise).toEqual({ snrDb: 30, colour: 'pink', seed: 1 });
		expect(spec.strikes[0]).toMatchObject({ strings: [{ hz: 220.5 }] });
		expect(parseRenderSpec({ ...EXAMPLE, piano: 0 }).piano).toBe('0');
	});

	it.each([
		[null, /specification must be an object/],
		[[], /specification must be an object/],
		[{ ...EXAMPLE, second: 3 }, /unknown field "second"/],
		[{ ...EXAMPLE, seconds: -1 }, /^seconds/],
		[{ ...EXAMPLE, seconds: 1e9 }, /^seconds/],
		[{ ...EXAMPLE, sampleRateHz: 0 }, /^sampleRateHz/],
		[{ ...EXAMPLE, sampleRateHz: 44100.5 }, /^sampleRateHz/],
		[{ ...EXAMPLE, piano: 'organ' }, /unknown piano "organ"/],
		[{ ...EXAMPLE, strikes: [] }, /^strikes/],
		[{ ...EXAMPLE, strikes: [{ ...strike, note: 'A9' }] }, /strikes\[0\]\.note/],
		[{ ...EXAMPLE, strikes: [{ ...strike, atSeconds: 9 }] }, /strikes\[0\]\.atSeconds/],
		[{ ...EXAMPLE, strikes: [{ ...strike, velocity: 2 }] }, /strikes\[0\]\.velocity/],
		[{ ...EXAMPLE, strikes: [{ ...strike, strings: [] }] }, /strikes\[0\]\.strings/],
		[{ ...EXAMPLE, strikes: [{ ...strike, strings: [{}] }] }, /either cents or hz/],
		[
			{ ...EXAMPLE, strikes: [{ ...strike, strings: [{ cents: 1, hz: 2 }] }] },
			/either cents or hz/
		],
		[{ ...EXAMPLE, strikes: [{ ...strike, strings: [{ cents: 'x' }] }] }, /\.cents/],
		[{ ...EXAMPLE, strikes: [{ fork: { hz: -1 } }] }, /fork\.hz/],
		[{ ...EXAMPLE, strikes: [{ fork: 440 }] }, /fork must be an object/],
		[{ ...EXAMPLE, coupling: 'yes' }, /^coupling/],
		[{ ...EXAMPLE, noise: { snrDb: 30, colour: 'blue', seed: 1 } }, /noise\.colour/],
		[{ ...EXAMPLE, noise: { snrDb: 30, colour: 'pink', seed: 1.5 } }, /noise\.seed/],
		[{ ...EXAMPLE, format: 'mp3' }, /^format/],
		[{ ...EXAMPLE, temperament: 'odd' }, /^temperament/],
		[{ ...EXAMPLE, style: 'odd' }, /^style/]
	])('refuses %j with one line', (spec, message) => {
		const attempt = () => parseRenderSpec(spec);
		expect(attempt).toThrow(SpecError);
		expect(attempt).toThrow(message);
		try {
			attempt();
		} catch (error) {
			expect((error as Error).message).not.toContain('\n');
		}
	});
});
