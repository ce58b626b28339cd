import { noteName } from '../acoustics/units';
import { detectNote, tonePeaks } from './dsp/note-finder';
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
	const heard = detectNote(samples, sampleRateHz, strike, peaks);
	if (heard === null || heard === midi) return null;
	return `This sounds like ${noteName(heard)}. Was it ${noteName(midi)} that you struck?`;
}
