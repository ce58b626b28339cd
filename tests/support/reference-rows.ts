import { readFileSync } from 'node:fs';

/** Cells of one CSV line: commas between, double quotes around cells that hold commas. */
function cells(line: string): string[] {
	const found: string[] = [];
	for (const match of line.matchAll(/(?:^|,)(?:"((?:[^"]|"")*)"|([^,]*))/g)) {
		found.push(match[1] === undefined ? match[2] : match[1].replaceAll('""', '"'));
	}
	return found;
}

/** Rows of a table of fixtures/reference, by column name. */
export function referenceRows(table: string): Record<string, string>[] {
	const url = new URL(`../../fixtures/reference/${table}.csv`, import.meta.url);
	const [head, ...lines] = readFileSync(url, 'utf8').trimEnd().split(/\r?\n/);
	const columns = cells(head);
	return lines.map((line) => {
		const values = cells(line);
		return Object.fromEntries(columns.map((column, k) => [column, values[k] ?? '']));
	});
}

/** One row by its id; throws when there is none, so that a test cannot pass on nothing. */
export function referenceRow(table: string, rowId: string): Record<string, string> {
	const row = referenceRows(table).find((entry) => entry.row_id === rowId);
	if (!row) throw new Error(`no row ${rowId} in ${table}`);
	return row;
}
