import { otherNoteSentence } from './dsp/note-doubt';
import { otherNoteHeard, tonePeaks } from './dsp/note-finder';
import type { Strike } from './dsp/strike';

/**
 * A sentence when one note was named and the sound is rather another's; null when they agree or
 * nothing can be told. The comb of a wrongly named note can fit by chance, so the person is asked.
 */
export function noteDoubt(
	samples: Float32Array,
	sampleRateHz: number,
	strike: Strike,
	midi: number
): string | null {
	const peaks = tonePeaks(samples, sampleRateHz, strike);
	const heard = otherNoteHeard(samples, sampleRateHz, strike, peaks, midi);
	return heard === null ? null : otherNoteSentence(heard, midi);
}
