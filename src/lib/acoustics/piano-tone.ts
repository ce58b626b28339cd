import { interpolate } from './interpolation';
import type { PianoShape } from './piano-shapes';
import { HIGHEST_PARTIAL, type PartialTone } from './piano-types';
import { partialHzFromF1 } from './stiff-string';
import { DB_PER_NEPER, equalTemperamentHz, type Hertz, type Midi } from './units';

/**
 * Decay of one string sounding alone, first partial, dB/s: rows dec-019 to dec-029 of
 * fixtures/reference/decay-and-coupling.csv (defaults of a published synthesis model, S. Van
 * Duyne). The last two points are ours: they lead from that table's end at C6 towards the about
 * 98 dB/s at C7 that Bensa et al. 2003 give (from memory, row dec-045) without reaching it.
 */
const LONE_STRING_DECAY_DB: readonly (readonly [Midi, number])[] = [
	[21.678, 2.895],
	[24, 3],
	[36, 4.641],
	[41.953, 5.867],
	[48.173, 7.113],
	[53.818, 8.016],
	[59.693, 8.875],
	[66.605, 9.434],
	[73.056, 10.035],
	[78.931, 10.293],
	[84, 12.185],
	[96, 32],
	[108, 80]
];

/**
 * Loss that grows with the square of the frequency, dB/s at 1 Hz²: b2·(nπ/L)² of the C4 string of
 * row dec-044 (b2 = 2.7e-4 m²/s, L = 0.62 m) written in hertz; within 15 % also of its C2.
 */
const SQUARE_LOSS_DB_PER_HZ2 = (DB_PER_NEPER * 2.7e-4 * (Math.PI / 0.62) ** 2) / 261.63 ** 2;

/** Level of a blow of velocity 1, root mean square of full scale over the window below. */
const FULL_BLOW_LEVEL = 0.09;
/**
 * The level of a strike is taken over its first 0.1 s, about what the ear adds up: the short top
 * notes then sound as loud as the others without peaks that a limiter would bend.
 */
export const LEVEL_WINDOW_S = 0.1;
/** Partials above this are not heard and take no part in the level. */
export const AUDIBLE_LIMIT_HZ = 18_000;
/** The comb of the strike point never quite reaches zero: a hammer is some millimetres wide. */
const COMB_FLOOR = 0.04;

/** Decay of one string of the note sounding alone, first partial, dB/s, before a piano's factor. */
export function loneStringDecayDbPerSecond(midi: Midi): number {
	return interpolate(LONE_STRING_DECAY_DB, midi);
}

/**
 * The soundboard's unevenness: a factor around 1 on the bridge's loss that depends on frequency
 * alone, because the bridge does not know which string drives it. Invented, fixed, 0.6 to 1.4.
 */
function soundboardRipple(frequencyHz: Hertz, phase: number): number {
	const octaves = Math.log2(frequencyHz / 55);
	return 1 + 0.25 * Math.sin(5.1 * octaves + phase) + 0.15 * Math.sin(13.7 * octaves + 2 * phase);
}

/** Raw partial amplitudes of one note before normalisation: comb × hammer × soundboard. */
function rawAmplitude(shape: PianoShape, midi: Midi, partial: number, hz: Hertz, velocity: number) {
	const share = (midi - 21) / 87;
	const strikePoint = shape.strikePoint[0] + share * (shape.strikePoint[1] - shape.strikePoint[0]);
	const comb = Math.hypot(Math.sin(partial * Math.PI * strikePoint), COMB_FLOOR);
	// A felt hammer is a low-pass filter that opens with the blow (corner frequencies invented).
	const corner =
		shape.brightness * interpolate(HAMMER_CORNER_HZ, midi) * 2 ** (1.8 * (velocity - 0.6));
	const hammer = 1 / (1 + (hz / corner) ** 2);
	const low = (hz / shape.radiationCornerHz) ** 2;
	return comb * hammer * (low / (1 + low));
}

const HAMMER_CORNER_HZ: readonly (readonly [Midi, number])[] = [
	[21, 340],
	[45, 480],
	[60, 620],
	[72, 900],
	[84, 1500],
	[96, 2700],
	[108, 4200]
];

interface NoteTone {
	partials: PartialTone[];
}

const SILENT: PartialTone = {
	amplitude: 0,
	decayPerSecond: 0,
	bridgePerSecond: 0,
	bridgeReactancePerSecond: 0
};

/** Own loss and bridge terms of one partial, all 1/s. */
function losses(shape: PianoShape, midi: Midi, hz: Hertz, f1Hz: Hertz, phase: number) {
	const alone = (shape.decayFactor * loneStringDecayDbPerSecond(midi)) / DB_PER_NEPER;
	const square =
		(shape.decayFactor * SQUARE_LOSS_DB_PER_HZ2 * (hz * hz - f1Hz * f1Hz)) / DB_PER_NEPER;
	const bridge =
		(shape.bridgeShare * alone * soundboardRipple(hz, phase)) / soundboardRipple(f1Hz, phase);
	return {
		decayPerSecond: (1 - shape.bridgeShare) * alone + square,
		bridgePerSecond: bridge,
		// A tenth of the loss, sign changing along the soundboard's resonances: a unison then stands
		// some 0.1–0.3 cents off its strings, as measured ones do (row dec-018).
		bridgeReactancePerSecond: 0.12 * bridge * Math.cos(5.1 * Math.log2(hz / 55) + phase)
	};
}

/**
 * All partials of a note at one velocity, scaled so that the root mean square of the note with
 * all its strings over the first 0.1 s is velocity^1.5 × 0.09 of full scale, on every note: the
 * strings start in phase and decay together at γ + N·Re η.
 */
function noteTone(
	shape: PianoShape,
	midi: Midi,
	inharmonicity: number,
	strings: number,
	velocity: number
): NoteTone {
	const f1Hz = equalTemperamentHz(midi);
	const phase = shape.id.length;
	const partials: PartialTone[] = [];
	let energy = 0;
	for (let n = 1; n <= HIGHEST_PARTIAL; n += 1) {
		const hz = partialHzFromF1(n, f1Hz, inharmonicity);
		const raw = rawAmplitude(shape, midi, n, hz, velocity);
		const loss = losses(shape, midi, hz, f1Hz, phase);
		const spread = 2 * (loss.decayPerSecond + strings * loss.bridgePerSecond) * LEVEL_WINDOW_S;
		if (hz < AUDIBLE_LIMIT_HZ) {
			energy += (((strings * raw) ** 2 / 2) * -Math.expm1(-spread)) / spread;
		}
		partials.push({ amplitude: raw, ...loss });
	}
	const scale = (FULL_BLOW_LEVEL * velocity ** 1.5) / Math.sqrt(energy);
	for (const partial of partials) partial.amplitude *= scale;
	return { partials };
}

/** Level that a strike of this velocity has on every note, root mean square over its first 0.1 s. */
export function strikeLevel(velocity: number): number {
	return FULL_BLOW_LEVEL * Math.min(1, Math.max(0, velocity)) ** 1.5;
}

/**
 * The `tone` of a piano: computed note by note, the last velocity of each note kept.
 * Velocities outside 0..1 are taken as the nearer end.
 */
export function toneOf(
	shape: PianoShape,
	inharmonicity: (midi: Midi) => number,
	stringCount: (midi: Midi) => number
): (midi: Midi, partial: number, velocity: number) => PartialTone {
	const kept = new Map<Midi, { velocity: number; tone: NoteTone }>();
	return (midi, partial, velocity) => {
		const blow = Math.min(1, Math.max(0, velocity));
		let entry = kept.get(midi);
		if (!entry || entry.velocity !== blow) {
			const tone = noteTone(shape, midi, inharmonicity(midi), stringCount(midi), blow);
			entry = { velocity: blow, tone };
			kept.set(midi, entry);
		}
		return entry.tone.partials[partial - 1] ?? SILENT;
	};
}
