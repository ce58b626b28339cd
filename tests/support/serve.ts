/**
 * Serves the application on a scratch database for the browser tests and the benchmark: prints one line
 * of JSON (ServedApplication) when it is open, and stops everything when its standard input closes.
 */
import { join } from 'node:path';
import { startApplication } from '../../src/cli/application';
import { ROOT, stateFolder } from '../../src/cli/setup/places';
import { prepareFakeMicrophone } from './fake-microphone';

export interface ServedApplication {
	origin: string;
	mailFolder: string;
	databaseUrl: string;
}

/** Recordings that stand in for the microphone. */
const RECORDINGS = ['grand-one-a3-v10-l', 'grand-one-a3c4-m3-v10-l'];

const application = await startApplication({
	scratch: true,
	demo: true,
	say: (line) => process.stderr.write(`${line}\n`)
});
for (const name of RECORDINGS) {
	await prepareFakeMicrophone(
		join(ROOT, 'fixtures/recordings', `${name}.flac`),
		join(stateFolder('e2e'), `${name}.wav`)
	);
}
const served: ServedApplication = {
	origin: application.origin,
	mailFolder: application.mailFolder ?? '',
	databaseUrl: application.databaseUrl
};
process.stdout.write(`${JSON.stringify(served)}\n`);

let stopping = false;
async function stop() {
	if (stopping) return;
	stopping = true;
	await application.stop();
	process.exit(0);
}
void application.ended.then((code) => {
	if (stopping) return;
	process.stderr.write(`The server ended by itself (${code}).\n`);
	void stop();
});
process.stdin.resume();
process.stdin.on('end', stop);
process.stdin.on('close', stop);
process.on('SIGTERM', stop);
process.on('SIGINT', stop);
