import { midiFromNoteName } from '../../lib/acoustics/units';
import { parseRenderSpec } from '../../lib/acoustics/render-spec';
import { measureClip } from '../../lib/measurement/dsp/measure-clip';
import { renderSpec } from '../../lib/synthesis/dsp/render-spec';
import type { DemoCheck } from '../../lib/server/database/seeders/demo';
import type { DemoCheckPlan } from '../../lib/server/database/seeders/demo-people';

const SAMPLE_RATE_HZ = 44_100;
const SECONDS = 6;

/**
 * The demonstration's string checks: each planned string or pair is sounded by the engine, on a piano
 * of its own with a room's noise, and measured as a student's clip would be. Nothing is written by
 * hand but how far off the strings are.
 */
export function measuredChecks(plans: readonly DemoCheckPlan[]): DemoCheck[] {
	return plans.map((plan, index) => {
		const spec = parseRenderSpec({
			sampleRateHz: SAMPLE_RATE_HZ,
			seconds: SECONDS,
			piano: plan.piano,
			strikes: strikesOf(plan),
			coupling: true,
			noise: { snrDb: 38, colour: 'pink', seed: index + 1 }
		});
		const notes = plan.notes.map((name) => midiFromNoteName(name) ?? 69);
		const result = measureClip(renderSpec(spec), SAMPLE_RATE_HZ, { kind: plan.kind, notes });
		return { plan, result, sampleRateHz: SAMPLE_RATE_HZ };
	});
}

function strikesOf({ kind, notes, offCents }: DemoCheckPlan) {
	const at = { atSeconds: 0.2, velocity: 0.55 };
	if (kind === 'interval') {
		return notes.map((note, index) => ({ note, ...at, strings: [{ cents: index * offCents }] }));
	}
	const strings = kind === 'unison' ? [{ cents: 0 }, { cents: offCents }] : [{ cents: offCents }];
	return notes.map((note) => ({ note, ...at, strings }));
}
