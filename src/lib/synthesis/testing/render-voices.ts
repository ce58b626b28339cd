import { ToneBank } from '../dsp/tone-bank';
import { planVoice } from '../dsp/voice-plan';
import type { VoiceSpec } from '../types';

/** A struck note, the medium grand and velocity 0.6 unless said otherwise. */
export function voice(
	midi: number,
	stringsF1Hz: number[],
	rest: Partial<VoiceSpec> = {}
): VoiceSpec {
	return { id: `${midi}`, piano: 'medium-grand', midi, velocity: 0.6, stringsF1Hz, ...rest };
}

/** All voices struck together at time 0. */
export function renderVoices(
	voices: readonly VoiceSpec[],
	seconds: number,
	sampleRateHz = 48_000
): Float32Array {
	const bank = new ToneBank(sampleRateHz, voices.length);
	voices.forEach((spec, slot) => bank.strike(slot, planVoice(spec, sampleRateHz)));
	const samples = new Float32Array(Math.round(seconds * sampleRateHz));
	bank.process(samples);
	return samples;
}

/** f1 values this many cents from `hz`. */
export function detuned(hz: number, ...cents: number[]): number[] {
	return cents.map((c) => hz * 2 ** (c / 1200));
}
