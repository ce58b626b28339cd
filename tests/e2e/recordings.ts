/** What the real recordings hold, by their reference values. */
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

export const recording = (name: string) =>
	fileURLToPath(new URL(`../../fixtures/recordings/${name}.flac`, import.meta.url));

const rows = () =>
	readFileSync(
		fileURLToPath(new URL('../../fixtures/recordings/truth.csv', import.meta.url)),
		'utf8'
	)
		.trim()
		.split('\n')
		.map((line) => line.split(','));

/** One column of a clip's row; the first row when no item (partial) is named. */
export function truth(name: string, column: string, item?: string): number {
	const [head, ...lines] = rows();
	const at = (key: string) => head.indexOf(key);
	const found = lines.find(
		(line) => line[at('file')] === `${name}.flac` && (!item || line[at('item')] === item)
	);
	if (!found || at(column) < 0) throw new Error(`No ${column} of ${name} in truth.csv.`);
	return Number(found[at(column)]);
}

/** First partial of a stiff string, Hz: f_n = n f_0 sqrt(1 + B n²). */
export const firstPartialHz = (name: string) =>
	truth(name, 'f0_hz') * Math.sqrt(1 + truth(name, 'B'));

export const centsBetween = (hz: number, referenceHz: number) => 1200 * Math.log2(hz / referenceHz);
