import { readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { z } from 'zod';

/** A mail as the local sink received it. Written by the command line's sink, one JSON file a mail. */
export interface ReceivedMail {
	id: string;
	receivedAt: string;
	from: string;
	to: string[];
	subject: string;
	text: string;
	html: string | null;
	/** Addresses of web pages found in the text, in order. */
	links: string[];
}

const schema = z.object({
	id: z.string(),
	receivedAt: z.iso.datetime(),
	from: z.string(),
	to: z.array(z.string()),
	subject: z.string(),
	text: z.string(),
	html: z.string().nullable(),
	links: z.array(z.string())
});

/** The newest mails in the sink's folder, newest first; what is not one of its files is passed over. */
export async function readSink(folder: string, limit = 100): Promise<ReceivedMail[]> {
	const names = (await readdir(folder).catch(() => [])).filter((n) => n.endsWith('.json'));
	// Names begin with the time of arrival.
	const newest = names.sort().reverse().slice(0, limit);
	const read = await Promise.all(
		newest.map(async (name) => {
			try {
				const parsed = schema.safeParse(JSON.parse(await readFile(join(folder, name), 'utf8')));
				return parsed.success ? [parsed.data] : [];
			} catch {
				return [];
			}
		})
	);
	return read.flat();
}
