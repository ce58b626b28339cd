import { readFile } from 'node:fs/promises';
import path from 'node:path';
import { midiFromNoteName } from '../../acoustics/units';
import { decodeAudio } from '../decode';
import { measureClip } from '../dsp/measure-clip';
import type { MeasureResult, NoteMeasure, PairMeasure } from '../types';

/** One row of the recordings' reference table (fixtures/recordings/README.md). */
export interface TruthRow {
	file: string;
	kind: 'note' | 'shift' | 'interval';
	notes: string[];
	f0Hz: number[];
	inharmonicity: number[];
	lowerPartial: number;
	upperPartial: number;
	class: 'beat' | 'complex' | 'slow' | 'none';
	beatHz: number | null;
	tolHz: number | null;
	/** The rate below which a beat does no harm in a "slow" row. */
	slowLimitHz: number | null;
	confidence: 'A' | 'B' | 'C';
}

/** What the meter made of a row. */
export type Outcome = 'right' | 'wrong' | 'not measurable';

export interface ScoredRow {
	row: TruthRow;
	outcome: Outcome;
	pair: PairMeasure | null;
}

export interface ScoredClip {
	file: string;
	kind: TruthRow['kind'];
	truth: TruthRow;
	result: MeasureResult;
	rows: ScoredRow[];
}

/** Reads truth.csv. */
export async function readTruth(folder: string): Promise<TruthRow[]> {
	const text = await readFile(path.join(folder, 'truth.csv'), 'utf8');
	const [head, ...lines] = text.trim().split(/\r?\n/);
	const names = head.split(',');
	return lines.map((line) => {
		const cells = line.split(',');
		return toRow(Object.fromEntries(names.map((name, i) => [name, cells[i] ?? ''])));
	});
}

function toRow(cell: Record<string, string>): TruthRow {
	const [lower, upper] = cell.item.split(':').map(Number);
	const limit = /at most ([\d.]+) Hz/.exec(cell.remark);
	const number = (text: string): number | null => (text === '' ? null : Number(text));
	return {
		file: cell.file,
		kind: cell.kind as TruthRow['kind'],
		notes: cell.notes.split('+'),
		f0Hz: cell.f0_hz.split(';').map(Number),
		inharmonicity: cell.B.split(';').map(Number),
		lowerPartial: lower,
		upperPartial: upper ?? lower,
		class: cell.class as TruthRow['class'],
		beatHz: number(cell.beat_hz),
		tolHz: number(cell.tol_hz),
		slowLimitHz: limit ? Number(limit[1]) : null,
		confidence: cell.confidence as TruthRow['confidence']
	};
}

/**
 * Right: a rate within the row's limit, or no rate above the limit of a "slow" row. Wrong: a rate
 * outside it, or "still" with a limit below the true rate. Not measurable: no rate where there
 * is one.
 */
export function judge(row: TruthRow, pair: PairMeasure | null): Outcome {
	const rate = pair?.verdict === 'beating' ? pair.beatRateHz : null;
	if (row.class === 'slow' || row.class === 'none') {
		const limit = row.slowLimitHz ?? (row.beatHz ?? 0) + (row.tolHz ?? 0.3);
		return rate === null || rate <= limit ? 'right' : 'wrong';
	}
	if (row.beatHz === null || row.tolHz === null) return 'not measurable';
	if (rate !== null) return Math.abs(rate - row.beatHz) <= row.tolHz ? 'right' : 'wrong';
	const limit = /faster than ([\d.]+)/.exec(pair?.reason ?? '');
	const denied = pair?.verdict === 'still' && limit && Number(limit[1]) < row.beatHz - row.tolHz;
	return denied ? 'wrong' : 'not measurable';
}

/**
 * Measures every clip of the folder and judges every row of its table.
 * @param match part of the file names wanted
 * @param seconds length used of each clip, the whole when left out
 */
export async function scoreRecordings(
	folder: string,
	match = '',
	seconds?: number
): Promise<ScoredClip[]> {
	const truth = (await readTruth(folder)).filter(({ file }) => file.includes(match));
	const clips: ScoredClip[] = [];
	for (const file of new Set(truth.map((row) => row.file))) {
		const rows = truth.filter((row) => row.file === file);
		const { samples, sampleRateHz } = await decodeAudio(await readFile(path.join(folder, file)));
		const kind = rows[0].kind === 'shift' ? 'unison' : rows[0].kind;
		const notes = rows[0].notes.map((name) => midiFromNoteName(name) ?? 0);
		const result = measureClip(samples, sampleRateHz, { kind, notes, seconds });
		const scored = rows.map((row) => {
			const pair = pairOf(result, row);
			return { row, outcome: judge(row, pair), pair };
		});
		clips.push({ file, kind: rows[0].kind, truth: rows[0], result, rows: scored });
	}
	return clips;
}

function pairOf(result: MeasureResult, row: TruthRow): PairMeasure | null {
	return (
		result.pairs.find(
			(pair) => pair.lowerPartial === row.lowerPartial && pair.upperPartial === row.upperPartial
		) ?? null
	);
}

/** Errors of f0 (cents) and B (share) of a single note's measurement; null when not found. */
export function noteErrors(
	truth: TruthRow,
	note: NoteMeasure
): { f0Cents: number; inharmonicityShare: number } | null {
	if (note.f1Hz === null || note.inharmonicity === null) return null;
	const f0Hz = note.f1Hz / Math.sqrt(1 + note.inharmonicity);
	return {
		f0Cents: 1200 * Math.log2(f0Hz / truth.f0Hz[0]),
		inharmonicityShare: note.inharmonicity / truth.inharmonicity[0] - 1
	};
}
