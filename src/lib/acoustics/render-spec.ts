import { PianoSpecError, pianoFromSpec } from './piano-spec';
import type { InlinePiano, PianoSpec } from './piano-types';
import { DEFAULT_STYLE, TARGET_STYLES } from './target-styles';
import { TEMPERAMENT_IDS } from './temperaments';
import { isPianoMidi, midiFromNoteName, type Cents, type Hertz, type Seconds } from './units';

/** A string of a strike: cents of f1 from the piano's target, or f1 itself in hertz. */
export type StringSpec = { cents: Cents } | { hz: Hertz };

export interface NoteStrike {
	/** Note name, e.g. "A3". */
	note: string;
	atSeconds: Seconds;
	/** 0 to 1. */
	velocity: number;
	/** One to three strings that sound. */
	strings: StringSpec[];
}

export interface ForkStrike {
	fork: { hz: Hertz };
	atSeconds: Seconds;
	velocity: number;
}

export type StrikeSpec = NoteStrike | ForkStrike;

export interface NoiseSpec {
	/** Signal-to-noise ratio over the whole clip, dB. */
	snrDb: number;
	colour: 'white' | 'pink';
	seed: number;
}

/** What `render` is asked to sound. */
export interface RenderSpec {
	sampleRateHz: number;
	seconds: Seconds;
	piano: PianoSpec;
	strikes: StrikeSpec[];
	/** False: every string's partial is one damped sinusoid of its own. */
	coupling: boolean;
	noise: NoiseSpec | null;
	format: 'float32' | 'int16';
	temperament: string;
	style: string;
}

/** Thrown for a specification that cannot be rendered; the message is one line for the person. */
export class SpecError extends Error {
	override name = 'SpecError';
}

type Fields = Record<string, unknown>;

const SPEC_FIELDS =
	'sampleRateHz seconds piano strikes coupling noise format temperament style'.split(' ');
const LONGEST_SECONDS = 120;
const MOST_STRIKES = 256;

function fields(value: unknown, where: string, allowed: readonly string[]): Fields {
	if (typeof value !== 'object' || value === null || Array.isArray(value)) {
		throw new SpecError(`${where} must be an object`);
	}
	const extra = Object.keys(value).find((key) => !allowed.includes(key));
	if (extra !== undefined) {
		throw new SpecError(
			`${where} has an unknown field "${extra}": it may have ${allowed.join(', ')}`
		);
	}
	return value as Fields;
}

function numberIn(value: unknown, where: string, low: number, high: number): number {
	if (typeof value !== 'number' || !(value >= low && value <= high)) {
		throw new SpecError(`${where} must be a number from ${low} to ${high}`);
	}
	return value;
}

function oneOf<T extends string>(value: unknown, where: string, choices: readonly T[]): T {
	if (!choices.includes(value as T)) {
		throw new SpecError(`${where} must be one of ${choices.join(', ')}`);
	}
	return value as T;
}

function stringSpec(value: unknown, where: string): StringSpec {
	const entry = fields(value, where, ['cents', 'hz']);
	if ('cents' in entry === 'hz' in entry) {
		throw new SpecError(`${where} must have either cents or hz`);
	}
	return 'hz' in entry
		? { hz: numberIn(entry.hz, `${where}.hz`, 10, 10_000) }
		: { cents: numberIn(entry.cents, `${where}.cents`, -1200, 1200) };
}

function strikeSpec(value: unknown, index: number, seconds: Seconds): StrikeSpec {
	const where = `strikes[${index}]`;
	const isFork = typeof value === 'object' && value !== null && 'fork' in value;
	const entry = fields(
		value,
		where,
		isFork ? ['fork', 'atSeconds', 'velocity'] : ['note', 'atSeconds', 'velocity', 'strings']
	);
	const common = {
		atSeconds: numberIn(entry.atSeconds ?? 0, `${where}.atSeconds`, 0, seconds),
		velocity: numberIn(entry.velocity ?? 0.6, `${where}.velocity`, 0, 1)
	};
	if (isFork) {
		const fork = fields(entry.fork, `${where}.fork`, ['hz']);
		return { fork: { hz: numberIn(fork.hz, `${where}.fork.hz`, 10, 10_000) }, ...common };
	}
	const midi = typeof entry.note === 'string' ? midiFromNoteName(entry.note) : null;
	if (midi === null || !isPianoMidi(midi)) {
		throw new SpecError(`${where}.note must be a note from A0 to C8, such as "A3" or "C#4"`);
	}
	const strings: unknown = entry.strings ?? [{ cents: 0 }];
	if (!Array.isArray(strings) || strings.length < 1 || strings.length > 3) {
		throw new SpecError(`${where}.strings must be a list of one to three strings`);
	}
	return {
		note: entry.note as string,
		...common,
		strings: strings.map((item, k) => stringSpec(item, `${where}.strings[${k}]`))
	};
}

function pianoSpec(value: unknown): PianoSpec {
	const spec = value === 0 ? '0' : (value as PianoSpec);
	try {
		pianoFromSpec(spec);
	} catch (error) {
		if (error instanceof PianoSpecError) throw new SpecError(error.message);
		throw error;
	}
	return typeof spec === 'string' ? spec : (spec satisfies InlinePiano);
}

function noiseSpec(value: unknown): NoiseSpec | null {
	if (value === null || value === undefined) return null;
	const noise = fields(value, 'noise', ['snrDb', 'colour', 'seed']);
	const seed = numberIn(noise.seed ?? 1, 'noise.seed', 0, 2 ** 32 - 1);
	if (!Number.isInteger(seed)) throw new SpecError('noise.seed must be a whole number');
	return {
		snrDb: numberIn(noise.snrDb, 'noise.snrDb', -40, 200),
		colour: oneOf(noise.colour ?? 'white', 'noise.colour', ['white', 'pink'] as const),
		seed
	};
}

/**
 * Reads a specification of a rendering. Required: seconds and strikes; the rest has defaults
 * (48000 Hz, medium grand, coupled, no noise, float32, equal temperament, default style; a strike
 * at 0 s with velocity 0.6 and one string at the target).
 * Throws {@link SpecError} naming the field at fault.
 */
export function parseRenderSpec(json: unknown): RenderSpec {
	const spec = fields(json, 'the specification', SPEC_FIELDS);
	const seconds = numberIn(spec.seconds, 'seconds', 0.01, LONGEST_SECONDS);
	if (
		!Array.isArray(spec.strikes) ||
		spec.strikes.length < 1 ||
		spec.strikes.length > MOST_STRIKES
	) {
		throw new SpecError(`strikes must be a list of 1 to ${MOST_STRIKES} strikes`);
	}
	const sampleRateHz = numberIn(spec.sampleRateHz ?? 48_000, 'sampleRateHz', 8_000, 192_000);
	if (!Number.isInteger(sampleRateHz)) {
		throw new SpecError('sampleRateHz must be a whole number');
	}
	if (spec.coupling !== undefined && typeof spec.coupling !== 'boolean') {
		throw new SpecError('coupling must be true or false');
	}
	return {
		sampleRateHz,
		seconds,
		piano: pianoSpec(spec.piano ?? 'medium-grand'),
		strikes: spec.strikes.map((strike, index) => strikeSpec(strike, index, seconds)),
		coupling: spec.coupling ?? true,
		noise: noiseSpec(spec.noise),
		format: oneOf(spec.format ?? 'float32', 'format', ['float32', 'int16'] as const),
		temperament: oneOf(spec.temperament ?? 'equal', 'temperament', TEMPERAMENT_IDS),
		style: oneOf(spec.style ?? DEFAULT_STYLE, 'style', Object.keys(TARGET_STYLES))
	};
}
