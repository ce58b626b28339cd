import {
	AUDIBLE_LIMIT_HZ,
	HIGHEST_PARTIAL,
	LEVEL_WINDOW_S,
	pianoFromSpec,
	strikeLevel
} from '../../acoustics/piano-model';
import { partialHzFromF1 } from '../../acoustics/stiff-string';
import { equalTemperamentHz, ratioFromCents } from '../../acoustics/units';
import type { BringForward, VoiceSpec } from '../types';

/** Strings a voice can hold: three of the note and one more for a second polarisation. */
export const MAX_STRINGS = 4;
/** Partials a voice can hold. */
export const MAX_PARTIALS = HIGHEST_PARTIAL;
/** Partials above this share of the sample rate are left out: a retuned string must not fold over. */
const HIGHEST_SHARE_OF_RATE = 0.45;

/**
 * All that a kernel needs to sound one strike: numbers only, so that it can be posted to the audio
 * thread. Arrays over partials have one entry for each partial that sounds.
 */
export interface VoicePlan {
	/** Same key, same layout: a strike with an equal key adds to what sounds. */
	key: string;
	/** f_n / f_1 of a string. */
	stretch: Float64Array;
	/** Drive of one string, real and imaginary part: linear amplitude and starting phase. */
	driveRe: Float64Array;
	driveIm: Float64Array;
	/** γ_n, 1/s. */
	ownDecay: Float64Array;
	/** Re η_n and Im η_n, 1/s. */
	bridgeRe: Float64Array;
	bridgeIm: Float64Array;
	/** f_1 of each string sounding alone, Hz. */
	stringF1Hz: Float64Array;
	/** Amplitude of each string relative to a struck one. */
	stringGain: Float64Array;
	/** 1 where the string takes no part in the coupling. */
	stringSolo: Uint8Array;
	/** 1 where the mute lies on the string. */
	stringMuted: Uint8Array;
	/** A second polarisation: the string it belongs to, or −1, and its frequency ratio to it. */
	twinOf: number;
	twinRatio: number;
	/** Length of the smooth onset, s. */
	onsetSeconds: number;
	/** Extra decay once the damper lies on the strings, 1/s. */
	damperPerSecond: number;
	/** Starting amplitude of the knock, linear, and the seed of its noise. */
	knockLevel: number;
	knockSeed: number;
}

/**
 * Starting phase of partial n, rad: quadratic in n, which keeps the peaks of a tone of many
 * partials low (Schroeder 1970, IEEE Trans. Inf. Theory 16:85). Every note uses the same phases.
 */
export function startingPhase(partial: number): number {
	return (-Math.PI * partial * partial) / MAX_PARTIALS;
}

/** Contact of the hammer, s: from about 4 ms in the bass to 1.5 ms at the top (common practice, no source). */
function onsetSeconds(midi: number): number {
	return 0.004 - (0.0025 * (midi - 21)) / 87;
}

/** Factor on partial amplitudes that brings the wanted one forward. */
function emphasis(hz: Float64Array, forward: BringForward | undefined): Float64Array {
	const factor = new Float64Array(hz.length).fill(1);
	if (!forward || hz.length === 0) return factor;
	let nearest = 0;
	for (let p = 1; p < hz.length; p += 1) {
		const closer =
			Math.abs(hz[p] - forward.frequencyHz) < Math.abs(hz[nearest] - forward.frequencyHz);
		if (closer) nearest = p;
	}
	factor.fill(10 ** (-Math.min(40, Math.max(0, forward.gainDb)) / 20));
	factor[nearest] = 1;
	return factor;
}

/**
 * Scale that gives a strike its level: root mean square over the first 0.1 s of `strings` equal
 * strings of these amplitudes is `strikeLevel`, however many strings the note has.
 */
function levelScale(amplitude: Float64Array, plan: VoicePlan, strings: number, velocity: number) {
	let energy = 0;
	for (let p = 0; p < amplitude.length; p += 1) {
		const spread = 2 * (plan.ownDecay[p] + strings * plan.bridgeRe[p]) * LEVEL_WINDOW_S;
		const mean = spread > 1e-9 ? -Math.expm1(-spread) / spread : 1;
		energy += ((strings * amplitude[p]) ** 2 / 2) * mean;
	}
	return energy > 0 ? strikeLevel(velocity) / Math.sqrt(energy) : 0;
}

function emptyPlan(key: string, partials: number, stringF1Hz: number[]): VoicePlan {
	const list = () => new Float64Array(partials);
	return {
		key,
		stretch: list(),
		driveRe: list(),
		driveIm: list(),
		ownDecay: list(),
		bridgeRe: list(),
		bridgeIm: list(),
		stringF1Hz: Float64Array.from(stringF1Hz),
		stringGain: new Float64Array(stringF1Hz.length).fill(1),
		stringSolo: new Uint8Array(stringF1Hz.length),
		stringMuted: new Uint8Array(stringF1Hz.length),
		twinOf: -1,
		twinRatio: 1,
		onsetSeconds: 0.003,
		damperPerSecond: 40,
		knockLevel: 0,
		knockSeed: 1
	};
}

function checkSpec(spec: VoiceSpec): void {
	if (!Number.isInteger(spec.midi) || spec.midi < 21 || spec.midi > 108) {
		throw new RangeError('a note must lie between A0 and C8');
	}
	if (spec.stringsF1Hz.length < 1 || spec.stringsF1Hz.length > 3) {
		throw new RangeError('a note has one to three strings');
	}
	if (!spec.stringsF1Hz.every((hz) => hz > 0 && Number.isFinite(hz))) {
		throw new RangeError('a string needs a frequency above 0 Hz');
	}
}

function tooHigh(hz: number, sampleRateHz: number): string {
	return `${hz} Hz is too high for a sample rate of ${sampleRateHz} Hz`;
}

/**
 * Partials that sound: below the limit also when the string is drawn up to half a semitone above
 * its place, so that retuning does not change their number.
 */
function partialCount(spec: VoiceSpec, inharmonicity: number, sampleRateHz: number): number {
	const limitHz = Math.min(AUDIBLE_LIMIT_HZ, HIGHEST_SHARE_OF_RATE * sampleRateHz);
	const highestF1Hz = Math.max(
		...spec.stringsF1Hz,
		equalTemperamentHz(spec.midi) * ratioFromCents(50)
	);
	let partials = 0;
	while (
		partials < MAX_PARTIALS &&
		partialHzFromF1(partials + 1, highestF1Hz, inharmonicity) < limitHz
	) {
		partials += 1;
	}
	if (partials === 0) throw new RangeError(tooHigh(highestF1Hz, sampleRateHz));
	return partials;
}

/** The plan's strings: frequencies, coupling, mutes and a second polarisation. */
function planStrings(spec: VoiceSpec, partials: number): VoicePlan {
	const f1Hz = [...spec.stringsF1Hz];
	const strings = f1Hz.length;
	const twin = spec.falseBeat && spec.falseBeat.string < strings ? spec.falseBeat : undefined;
	if (twin) f1Hz.push(f1Hz[twin.string] * ratioFromCents(twin.cents));
	const plan = emptyPlan(`${spec.midi}/${f1Hz.length}/${partials}`, partials, f1Hz);
	plan.stringSolo.fill((spec.coupling ?? true) ? 0 : 1);
	for (let s = 0; s < strings; s += 1) plan.stringMuted[s] = spec.muted?.[s] ? 1 : 0;
	if (twin) {
		plan.twinOf = twin.string;
		plan.twinRatio = ratioFromCents(twin.cents);
		plan.stringGain[strings] = Math.min(1, Math.max(0, twin.depth));
		plan.stringSolo[strings] = 1;
		plan.stringMuted[strings] = plan.stringMuted[twin.string];
	}
	return plan;
}

/**
 * Works a strike out for a sample rate: which partials sound, how strong, how they decay.
 * Throws RangeError for a note off the keyboard, strings that are not one to three frequencies, or
 * a pitch that the sample rate cannot carry.
 */
export function planVoice(spec: VoiceSpec, sampleRateHz: number): VoicePlan {
	checkSpec(spec);
	const piano = pianoFromSpec(spec.piano);
	const inharmonicity = piano.inharmonicity(spec.midi);
	const partials = partialCount(spec, inharmonicity, sampleRateHz);
	const plan = planStrings(spec, partials);
	const amplitude = new Float64Array(partials);
	for (let p = 0; p < partials; p += 1) {
		const tone = piano.tone(spec.midi, p + 1, spec.velocity);
		plan.stretch[p] = partialHzFromF1(p + 1, 1, inharmonicity);
		plan.ownDecay[p] = tone.decayPerSecond;
		plan.bridgeRe[p] = tone.bridgePerSecond;
		plan.bridgeIm[p] = tone.bridgeReactancePerSecond;
		amplitude[p] = tone.amplitude;
	}
	const hz = plan.stretch.map((ratio) => ratio * spec.stringsF1Hz[0]);
	const factor = emphasis(hz, spec.bringForward);
	for (let p = 0; p < partials; p += 1) amplitude[p] *= factor[p];
	const sounding = spec.stringsF1Hz.filter((_, s) => plan.stringMuted[s] === 0).length;
	setDrive(plan, amplitude, levelScale(amplitude, plan, Math.max(1, sounding), spec.velocity));
	plan.onsetSeconds = onsetSeconds(spec.midi);
	// Bass dampers take longer to stop their strings (common practice, no source; values invented).
	plan.damperPerSecond = 18 + (40 * (spec.midi - 21)) / 87;
	plan.knockLevel = 0.5 * strikeLevel(spec.velocity);
	plan.knockSeed = 1 + spec.midi;
	return plan;
}

function setDrive(plan: VoicePlan, amplitude: Float64Array, scale: number): void {
	for (let p = 0; p < amplitude.length; p += 1) {
		plan.driveRe[p] = scale * amplitude[p] * Math.cos(startingPhase(p + 1));
		plan.driveIm[p] = scale * amplitude[p] * Math.sin(startingPhase(p + 1));
	}
}

/** Tones of a fork: ratio to its pitch, amplitude, decay in 1/s (common practice, no source). */
const FORK_TONES: readonly (readonly [number, number, number])[] = [
	[1, 1, 0.35],
	[2, 0.03, 1.2],
	// The clang: second mode of a clamped bar, (4.694/1.875)² times the first.
	[6.267, 0.06, 9]
];

/**
 * A tuning fork: one nearly pure, slowly decaying sinusoid with a weak octave and, at the strike,
 * a short clang.
 * @param hz 20 Hz upwards
 * @param velocity 0..1
 */
export function planFork(hz: number, velocity: number, sampleRateHz: number): VoicePlan {
	if (!(hz > 0) || !Number.isFinite(hz))
		throw new RangeError('a fork needs a frequency above 0 Hz');
	const limitHz = HIGHEST_SHARE_OF_RATE * sampleRateHz;
	const tones = FORK_TONES.filter(([ratio]) => ratio * hz < limitHz);
	if (tones.length === 0) throw new RangeError(tooHigh(hz, sampleRateHz));
	const plan = emptyPlan(`fork/${tones.length}`, tones.length, [hz]);
	plan.stringSolo[0] = 1;
	const amplitude = Float64Array.from(tones, ([, a]) => a);
	tones.forEach(([ratio, , decay], p) => {
		plan.stretch[p] = ratio;
		plan.ownDecay[p] = decay;
	});
	setDrive(plan, amplitude, levelScale(amplitude, plan, 1, velocity));
	plan.onsetSeconds = 0.005;
	plan.damperPerSecond = 30;
	return plan;
}
