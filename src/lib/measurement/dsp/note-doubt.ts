import { noteName } from '../../acoustics/units';

/** The question put to a person whose sound is rather another note's than the one named. */
export function otherNoteSentence(heardMidi: number, namedMidi: number): string {
	return `This sounds like ${noteName(heardMidi)}. Was it ${noteName(namedMidi)} that you struck?`;
}
