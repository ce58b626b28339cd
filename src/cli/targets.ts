import { existsSync } from 'node:fs';
import { INTERVALS, customaryPair } from '../lib/acoustics/intervals';
import {
	KEYBOARD,
	isPianoId,
	pianoFromSpec,
	type PianoModel,
	type PianoSpec
} from '../lib/acoustics/piano-model';
import { solveTargets, targetBeat } from '../lib/acoustics/targets';
import { HIGHEST_MIDI, noteName } from '../lib/acoustics/units';
import { fail, parseCommandLine, pathFromCaller, readJson, runCommand } from './arguments';

/** The piano of `--piano`: a shipped name, 0, or a JSON file. */
function pianoFromOption(value: string): PianoModel {
	const isName = value === '0' || isPianoId(value);
	const isFile = !isName && (/\.json$/i.test(value) || existsSync(pathFromCaller(value)));
	return pianoFromSpec(isFile ? (readJson(value) as PianoSpec) : value);
}

function targets(argv: string[]): unknown {
	const { words, options } = parseCommandLine(argv, ['piano', 'temperament', 'style']);
	if (words.length > 0) fail(`unexpected "${words[0]}"`);
	if (!options.piano) fail('say which piano: --piano NAME|MODEL.json');
	const piano = pianoFromOption(options.piano);
	const tuning = solveTargets(piano, {
		temperament: options.temperament,
		style: options.style
	});
	const notes = KEYBOARD.map((midi) => ({
		midi,
		note: noteName(midi),
		inharmonicity: piano.inharmonicity(midi),
		f1Hz: tuning.f1Hz(midi),
		centsFromEqual: tuning.cents(midi)
	}));
	return { notes, beats: beats(piano, tuning) };
}

/** Every named interval on the keyboard at every pair that is listened to, customary first. */
function beats(piano: PianoModel, tuning: ReturnType<typeof solveTargets>): unknown[] {
	const rows: unknown[] = [];
	for (const interval of Object.values(INTERVALS)) {
		if (interval.semitones === 0) continue;
		for (const low of KEYBOARD) {
			const high = low + interval.semitones;
			if (high > HIGHEST_MIDI) break;
			const first = customaryPair(low, high);
			const rest = interval.pairs.filter((pair) => pair.lowerPartial !== first?.lowerPartial);
			for (const pair of first ? [first, ...rest] : rest) {
				const beat = targetBeat(piano, tuning, low, high, pair);
				rows.push({
					lower: noteName(low),
					upper: noteName(high),
					lowerPartial: beat.lowerPartial,
					upperPartial: beat.upperPartial,
					beatRateHz: beat.beatRateHz,
					direction: beat.direction
				});
			}
		}
	}
	return rows;
}

await runCommand(targets);
