import { pianoFromSpec } from '../../acoustics/piano-model';
import { SpecError, type RenderSpec, type StrikeSpec } from '../../acoustics/render-spec';
import { solveTargets, type TargetTuning } from '../../acoustics/targets';
import { midiFromNoteName, ratioFromCents } from '../../acoustics/units';
import { limit } from './limiter';
import { makeNoise, rootMeanSquare } from './noise';
import { ToneBank } from './tone-bank';
import { planFork, planVoice, type VoicePlan } from './voice-plan';

interface ScheduledStrike {
	sample: number;
	slot: number;
	plan: VoicePlan;
}

/** The piano's target tuning, solved only when a string is given in cents. */
function lazyTargets(spec: RenderSpec): () => TargetTuning {
	let targets: TargetTuning | null = null;
	return () => {
		targets ??= solveTargets(pianoFromSpec(spec.piano), {
			temperament: spec.temperament,
			style: spec.style
		});
		return targets;
	};
}

function planStrike(spec: RenderSpec, strike: StrikeSpec, targets: () => TargetTuning): VoicePlan {
	try {
		return plan(spec, strike, targets);
	} catch (error) {
		throw error instanceof RangeError ? new SpecError(error.message) : error;
	}
}

function plan(spec: RenderSpec, strike: StrikeSpec, targets: () => TargetTuning): VoicePlan {
	if ('fork' in strike) return planFork(strike.fork.hz, strike.velocity, spec.sampleRateHz);
	const midi = midiFromNoteName(strike.note);
	if (midi === null) throw new SpecError(`"${strike.note}" is not a note`);
	const stringsF1Hz = strike.strings.map((string) =>
		'hz' in string ? string.hz : targets().f1Hz(midi) * ratioFromCents(string.cents)
	);
	return planVoice(
		{
			id: strike.note,
			piano: spec.piano,
			midi,
			velocity: strike.velocity,
			stringsF1Hz,
			coupling: spec.coupling
		},
		spec.sampleRateHz
	);
}

/** Strikes in order of time; strikes of one note share one voice, so the second adds to the first. */
function schedule(spec: RenderSpec): { strikes: ScheduledStrike[]; slots: number } {
	const slots = new Map<string, number>();
	const targets = lazyTargets(spec);
	const strikes = spec.strikes.map((strike) => {
		const name =
			'fork' in strike ? `fork/${strike.fork.hz}` : String(midiFromNoteName(strike.note));
		const slot = slots.get(name) ?? slots.size;
		slots.set(name, slot);
		const sample = Math.round(strike.atSeconds * spec.sampleRateHz);
		return { sample, slot, plan: planStrike(spec, strike, targets) };
	});
	strikes.sort((a, b) => a.sample - b.sample);
	return { strikes, slots: slots.size };
}

/** Largest sample of a clip with noise; the whole clip is turned down to it where need be. */
const NOISY_PEAK = 0.99;

function addNoise(samples: Float32Array, noise: NonNullable<RenderSpec['noise']>): void {
	const level = rootMeanSquare(samples) * 10 ** (-noise.snrDb / 20);
	const sum = makeNoise(samples.length, level, noise.colour, noise.seed);
	let peak = 0;
	for (let t = 0; t < sum.length; t += 1) {
		sum[t] += samples[t];
		peak = Math.max(peak, Math.abs(sum[t]));
	}
	// Limiting would change the ratio that was asked for; turning everything down does not.
	const factor = peak > NOISY_PEAK ? NOISY_PEAK / peak : 1;
	for (let t = 0; t < sum.length; t += 1) samples[t] = limit(factor * sum[t]);
}

/**
 * Renders a specification through the same kernels as the browser's sound engine: mono, within
 * ±1. Noise lies under the whole clip; its level is set against the root mean square of the whole
 * rendered tone. The same specification gives the same samples.
 * Throws SpecError for a string or fork too high for the sample rate.
 */
export function renderSpec(spec: RenderSpec): Float32Array {
	const samples = new Float32Array(Math.round(spec.seconds * spec.sampleRateHz));
	const { strikes, slots } = schedule(spec);
	const bank = new ToneBank(spec.sampleRateHz, slots);
	let at = 0;
	for (const strike of strikes) {
		if (strike.sample >= samples.length) break;
		bank.processRange(samples, at, strike.sample - at);
		at = strike.sample;
		bank.strike(strike.slot, strike.plan);
	}
	bank.processRange(samples, at, samples.length - at);
	if (spec.noise) addNoise(samples, spec.noise);
	return samples;
}
