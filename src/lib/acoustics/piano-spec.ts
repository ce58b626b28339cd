import {
	PIANO_SHAPES,
	shapeInharmonicity,
	shapeStringCount,
	type PianoShape
} from './piano-shapes';
import { toneOf } from './piano-tone';
import type { InlinePiano, PianoModel, PianoSpec } from './piano-types';
import { HIGHEST_MIDI, LOWEST_MIDI, isPianoMidi, midiFromNoteName, type Midi } from './units';

/** Thrown for a piano that cannot be understood; the message is one line for the person. */
export class PianoSpecError extends Error {
	override name = 'PianoSpecError';
}

/** Ids of the shipped pianos. */
export const PIANO_IDS = ['short-upright', 'medium-grand', 'long-grand'] as const;
export type PianoId = (typeof PIANO_IDS)[number];

/** B above this is no piano string (the stiffest, C8 of a small piano, has about 0.02). */
const HIGHEST_INHARMONICITY = 0.1;
const INLINE_FIELDS = ['name', 'kind', 'inharmonicity', 'strings'];

function build(
	shape: PianoShape,
	identity: Pick<PianoModel, 'id' | 'name' | 'kind'>,
	inharmonicity: (midi: Midi) => number,
	stringCount: (midi: Midi) => 1 | 2 | 3
): PianoModel {
	return {
		...identity,
		inharmonicity,
		stringCount,
		tone: toneOf(shape, inharmonicity, stringCount)
	};
}

const shipped = new Map<string, PianoModel>(
	PIANO_SHAPES.map((shape) => [
		shape.id,
		build(
			shape,
			{ id: shape.id, name: shape.name, kind: shape.kind },
			(midi) => shapeInharmonicity(shape, midi),
			(midi) => shapeStringCount(shape, midi)
		)
	])
);

const MEDIUM_GRAND = PIANO_SHAPES.find((shape) => shape.id === 'medium-grand') as PianoShape;

/** True for the id of a shipped piano. */
export function isPianoId(id: unknown): id is PianoId {
	return typeof id === 'string' && shipped.has(id);
}

/** A shipped piano by id; throws {@link PianoSpecError} for any other string. */
export function pianoModel(id: string): PianoModel {
	const model = shipped.get(id);
	if (!model) {
		throw new PianoSpecError(
			`unknown piano "${id}": use ${PIANO_IDS.join(', ')}, 0 for no stiffness, or a model`
		);
	}
	return model;
}

function valuesByNote<T extends number>(
	field: string,
	value: unknown,
	isValid: (entry: unknown) => entry is T,
	range: string
): { every: T | null; single: Map<Midi, T> } {
	const single = new Map<Midi, T>();
	if (value === undefined) return { every: null, single };
	if (isValid(value)) return { every: value, single };
	if (typeof value !== 'object' || value === null || Array.isArray(value)) {
		throw new PianoSpecError(`piano.${field} must be ${range}, or such values by note name`);
	}
	for (const [note, entry] of Object.entries(value)) {
		const midi = midiFromNoteName(note);
		if (midi === null || !isPianoMidi(midi)) {
			throw new PianoSpecError(`piano.${field} has "${note}", which is not a note from A0 to C8`);
		}
		if (!isValid(entry)) throw new PianoSpecError(`piano.${field}.${note} must be ${range}`);
		single.set(midi, entry);
	}
	return { every: null, single };
}

function isInharmonicity(value: unknown): value is number {
	return typeof value === 'number' && value >= 0 && value <= HIGHEST_INHARMONICITY;
}

function isStringCount(value: unknown): value is 1 | 2 | 3 {
	return value === 1 || value === 2 || value === 3;
}

function inlinePiano(spec: InlinePiano): PianoModel {
	const unknownField = Object.keys(spec).find((field) => !INLINE_FIELDS.includes(field));
	if (unknownField !== undefined) {
		throw new PianoSpecError(
			`piano has an unknown field "${unknownField}": it may have ${INLINE_FIELDS.join(', ')}`
		);
	}
	if (spec.name !== undefined && typeof spec.name !== 'string') {
		throw new PianoSpecError('piano.name must be a text');
	}
	if (spec.kind !== undefined && spec.kind !== 'upright' && spec.kind !== 'grand') {
		throw new PianoSpecError('piano.kind must be "upright" or "grand"');
	}
	const stiffness = valuesByNote(
		'inharmonicity',
		spec.inharmonicity,
		isInharmonicity,
		`a number from 0 to ${HIGHEST_INHARMONICITY}`
	);
	const strings = valuesByNote('strings', spec.strings, isStringCount, '1, 2 or 3');
	return build(
		MEDIUM_GRAND,
		{ id: 'inline', name: spec.name ?? 'Own model', kind: spec.kind ?? 'grand' },
		(midi) =>
			stiffness.single.get(midi) ?? stiffness.every ?? shapeInharmonicity(MEDIUM_GRAND, midi),
		(midi) => strings.single.get(midi) ?? strings.every ?? shapeStringCount(MEDIUM_GRAND, midi)
	);
}

/**
 * The piano of a specification: a shipped id, `'0'` (or the number 0) for the medium grand
 * without stiffness, or an inline model in which every omitted field or note is the medium
 * grand's. Throws {@link PianoSpecError} with a one-line message for anything else.
 */
export function pianoFromSpec(spec: PianoSpec | 0): PianoModel {
	if (spec === 0 || spec === '0') {
		return { ...inlinePiano({ inharmonicity: 0 }), id: '0', name: 'No stiffness' };
	}
	if (typeof spec === 'string') return pianoModel(spec);
	if (typeof spec !== 'object' || spec === null || Array.isArray(spec)) {
		throw new PianoSpecError('piano must be a name, 0, or a model');
	}
	return inlinePiano(spec);
}

/** Every note of the keyboard, 21 to 108. */
export const KEYBOARD: readonly Midi[] = Array.from(
	{ length: HIGHEST_MIDI - LOWEST_MIDI + 1 },
	(_, index) => LOWEST_MIDI + index
);
