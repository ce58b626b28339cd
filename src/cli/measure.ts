import { isPianoMidi, midiFromNoteName } from '../lib/acoustics/units';
import { decodeAudio } from '../lib/measurement/decode';
import { measureClip } from '../lib/measurement/dsp/measure-clip';
import type { MeasureKind, MeasureResult } from '../lib/measurement/types';
import { fail, parseCommandLine, readBytes, runCommand } from './arguments';

const USAGE = 'usage: measure -- IN.wav --kind unison|interval|note --notes A3[,C#4] [--seconds S]';
const KINDS: readonly MeasureKind[] = ['note', 'unison', 'interval'];
const LONGEST_SECONDS = 30;
const SHORTEST_SECONDS = 0.5;

function kindOf(text: string | undefined): MeasureKind {
	const kind = KINDS.find((known) => known === text);
	return kind ?? fail(`say what was struck: --kind unison, interval or note (${USAGE})`);
}

function notesOf(text: string | undefined, kind: MeasureKind): number[] {
	if (text === undefined) {
		return kind === 'note' ? [] : fail(`--kind ${kind} needs --notes (${USAGE})`);
	}
	const names = text.split(',').map((name) => name.trim());
	const wanted = kind === 'interval' ? 2 : 1;
	if (names.length !== wanted) {
		fail(`--kind ${kind} needs ${wanted === 1 ? 'one note' : 'two notes'}, got "${text}"`);
	}
	const notes = names.map((name) => {
		const midi = midiFromNoteName(name);
		return isPianoMidi(midi) ? midi : fail(`"${name}" is not a note of the piano (A0 to C8)`);
	});
	if (kind === 'interval' && notes[0] === notes[1]) {
		fail(`"${text}" is one note: use --kind unison`);
	}
	return notes;
}

function secondsOf(text: string | undefined): number | undefined {
	if (text === undefined) return undefined;
	const seconds = Number(text);
	if (!(seconds >= SHORTEST_SECONDS && seconds <= LONGEST_SECONDS)) {
		fail(`--seconds must be between ${SHORTEST_SECONDS} and ${LONGEST_SECONDS}, got "${text}"`);
	}
	return seconds;
}

/** `npm run measure`: one sound file in, one JSON object out. */
async function measure(argv: string[]): Promise<MeasureResult> {
	const { words, options } = parseCommandLine(argv, ['kind', 'notes', 'seconds']);
	if (words.length !== 1) fail(`name one sound file (${USAGE})`);
	const kind = kindOf(options.kind);
	const notes = notesOf(options.notes, kind);
	const seconds = secondsOf(options.seconds);
	const { samples, sampleRateHz } = await decodeAudio(readBytes(words[0]));
	return measureClip(samples, sampleRateHz, { kind, notes, seconds });
}

await runCommand(measure);
