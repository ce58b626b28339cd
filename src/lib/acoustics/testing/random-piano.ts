import { shapeInharmonicity, type StiffnessShape } from '../piano-shapes';
import { pianoFromSpec, type PianoModel } from '../piano-model';
import { KEYBOARD } from '../piano-spec';
import { integer, normal, uniform, type Random } from '../random';
import { noteName } from '../units';

/**
 * A made-up piano for checking that targets hold beyond the shipped three: B at A0, A4 and C8
 * drawn between and a little beyond theirs, and so the break.
 */
export function randomShape(random: Random): StiffnessShape {
	const bassSlope = uniform(random, -0.088, -0.08);
	const atA0 = Math.exp(uniform(random, Math.log(1.6e-4), Math.log(6.5e-4)));
	const trebleSlope = uniform(random, 0.0865, 0.0905);
	const atA4 = uniform(random, 5.2e-4, 7.6e-4);
	return {
		bassSlope,
		bassIntercept: Math.log(atA0) - 21 * bassSlope,
		trebleSlope,
		trebleIntercept: Math.log(atA4) - 69 * trebleSlope,
		breakMidi: integer(random, 39, 51),
		riseAboveBreak: uniform(random, 0.05, 0.25),
		dropAtBreak: uniform(random, 0.02, 0.15)
	};
}

/** A piano with the medium grand's tone and the given B, optionally scattered note by note. */
export function pianoWithStiffness(
	inharmonicity: (midi: number) => number,
	scatter = 0,
	random: Random = () => 0.5
): PianoModel {
	return pianoFromSpec({
		inharmonicity: Object.fromEntries(
			KEYBOARD.map((midi) => [
				noteName(midi),
				inharmonicity(midi) * (scatter === 0 ? 1 : Math.exp(scatter * normal(random)))
			])
		)
	});
}

/** {@link randomShape} as a piano. */
export function randomPiano(random: Random, scatter = 0): PianoModel {
	const shape = randomShape(random);
	return pianoWithStiffness((midi) => shapeInharmonicity(shape, midi), scatter, random);
}
