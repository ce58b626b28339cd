import { describe, expect, it } from 'vitest';
import { coincidentPairs, signedBeatHz } from '../../acoustics/intervals';
import { pianoModel } from '../../acoustics/piano-model';
import { partialHzFromF1 } from '../../acoustics/stiff-string';
import { equalTemperamentHz } from '../../acoustics/units';
import { renderVoices, voice } from '../testing/render-voices';
import { fitPoles } from '../testing/tone-fit';

/** Lower note, upper note, piano: fifths, fourths, thirds, sixths, octaves, a tenth, a twelfth. */
const CASES: readonly (readonly [number, number, string])[] = [
	[33, 45, 'long-grand'],
	[41, 48, 'short-upright'],
	[45, 57, 'medium-grand'],
	[53, 57, 'medium-grand'],
	[53, 58, 'medium-grand'],
	[53, 60, 'medium-grand'],
	[53, 62, 'short-upright'],
	[57, 61, 'long-grand'],
	[61, 65, 'medium-grand'],
	[53, 69, 'medium-grand'],
	[50, 69, 'medium-grand'],
	[69, 81, 'short-upright'],
	[84, 96, 'medium-grand']
];

describe('rendered interval beats equal the model (0.005 b/s or 0.1 %)', () => {
	it.each(CASES)('%i–%i on the %s', (low, high, id) => {
		const piano = pianoModel(id);
		const lowF1Hz = equalTemperamentHz(low) * 2 ** (2 / 1200);
		const highF1Hz = equalTemperamentHz(high) * 2 ** (-3 / 1200);
		const samples = renderVoices(
			[voice(low, [lowF1Hz], { piano: id }), voice(high, [highF1Hz], { piano: id })],
			3
		);
		const [pair] = coincidentPairs(low, high);
		const expected = signedBeatHz({
			lowF1Hz,
			highF1Hz,
			lowInharmonicity: piano.inharmonicity(low),
			highInharmonicity: piano.inharmonicity(high),
			...pair
		});
		const lowHz = partialHzFromF1(pair.lowerPartial, lowF1Hz, piano.inharmonicity(low));
		const tone = piano.tone(high, pair.upperPartial, 0.6);
		const fast = tone.decayPerSecond + tone.bridgePerSecond;
		const poles = fitPoles(samples, 48_000, lowHz + expected / 2, 2, {
			fromSeconds: 0.08,
			toSeconds: Math.min(3, 0.5 + 9 / fast),
			windowSeconds: low < 45 ? 0.35 : 0.25,
			rateHz: 50
		});
		const measured = poles[1].frequencyHz - poles[0].frequencyHz;
		const tolerance = Math.max(0.005, 0.001 * Math.abs(expected));
		expect(Math.abs(measured - Math.abs(expected))).toBeLessThan(tolerance);
		const lowest = Math.min(lowHz, lowHz + expected);
		expect(Math.abs(poles[0].frequencyHz - lowest)).toBeLessThan(0.005);
	});
});
