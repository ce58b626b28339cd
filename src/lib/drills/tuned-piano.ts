import { pianoModel, type PianoModel } from '../acoustics/piano-model';
import { solveTargets, type TargetTuning } from '../acoustics/targets';
import type { PianoId } from './types';

export interface TunedPiano {
	readonly model: PianoModel;
	/** Equal temperament on this piano's stiffness, A4 = 440 Hz. */
	readonly tuning: TargetTuning;
}

const tuned = new Map<PianoId, TunedPiano>();

/** A drill's piano with its target tuning; solved once, since neither ever changes. */
export function tunedPiano(id: PianoId): TunedPiano {
	const known = tuned.get(id);
	if (known) return known;
	const model = pianoModel(id);
	const fresh = { model, tuning: solveTargets(model) };
	tuned.set(id, fresh);
	return fresh;
}
