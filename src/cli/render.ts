/**
 * `npm run --silent render -- SPEC.json OUT.wav`: renders a specification through the kernels of
 * the sound engine into a mono WAV file. Nothing on stdout; bad input: exit 2, one line on stderr.
 */
import { renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { parseRenderSpec } from '../lib/acoustics/render-spec';
import { renderSpec } from '../lib/synthesis/dsp/render-spec';
import { encodeWav } from '../lib/synthesis/dsp/wav';
import { fail, parseCommandLine, pathFromCaller, readJson, runCommand } from './arguments';

/** A specification may name its piano by a file, as the other commands do. */
function withPianoFromFile(json: unknown): unknown {
	const piano = (json as { piano?: unknown } | null)?.piano;
	if (typeof piano !== 'string' || !/\.json$/i.test(piano)) return json;
	return { ...(json as object), piano: readJson(piano) };
}

/** Writes beside the place and moves there, so that a failure never leaves half a file. */
function writeWhole(path: string, bytes: Uint8Array): void {
	const target = pathFromCaller(path);
	const partial = `${target}.part`;
	try {
		if (statSync(target, { throwIfNoEntry: false })?.isDirectory()) fail(`${path} is a folder`);
		writeFileSync(partial, bytes);
		renameSync(partial, target);
	} catch (error) {
		rmSync(partial, { force: true });
		const code = (error as NodeJS.ErrnoException).code;
		if (code === undefined) throw error;
		fail(`cannot write ${path}: ${code === 'ENOENT' ? 'there is no such folder' : code}`);
	}
}

function render(argv: string[]): void {
	const { words } = parseCommandLine(argv, []);
	if (words.length !== 2) fail('say what and where to: render -- SPEC.json OUT.wav');
	const spec = parseRenderSpec(withPianoFromFile(readJson(words[0])));
	writeWhole(words[1], encodeWav(renderSpec(spec), spec.sampleRateHz, spec.format));
}

await runCommand(render);
