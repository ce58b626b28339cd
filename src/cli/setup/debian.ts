import { existsSync, mkdirSync, readdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { isRoot, runAloud, runQuietly, SetUpError } from './run';

const VERSIONS = '/usr/lib/postgresql';

/** Folder with initdb, pg_ctl and postgres of the newest installed version, or null. */
export function postgresPrograms(): string | null {
	const named = process.env.POSTGRES_BIN;
	if (named) return existsSync(join(named, 'initdb')) ? named : null;
	const versions = existsSync(VERSIONS)
		? readdirSync(VERSIONS)
				.filter((v) => existsSync(join(VERSIONS, v, 'bin', 'initdb')))
				.sort((a, b) => Number(b) - Number(a))
		: [];
	if (versions.length > 0) return join(VERSIONS, versions[0], 'bin');
	const onPath = runQuietly('sh', ['-c', 'command -v initdb']).stdout.trim();
	return onPath ? onPath.replace(/\/initdb$/, '') : null;
}

async function install(packages: string[], say: (line: string) => void): Promise<boolean> {
	if (!isRoot() || !existsSync('/usr/bin/apt-get')) return false;
	say(`Installing ${packages.join(', ')} with apt-get …`);
	const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
	// stdout stays free: what apt prints goes to stderr.
	const options = { env, stdio: ['ignore', 2, 2] as ['ignore', number, number] };
	const args = [
		'install',
		'-y',
		'--no-install-recommends',
		'-o',
		'Dpkg::Options::=--force-confold',
		'-o',
		'DPkg::Lock::Timeout=300',
		...packages
	];
	if ((await runAloud('apt-get', args, options)) === 0) return true;
	// The package lists of a fresh machine are empty or old.
	await runAloud('apt-get', ['update', '-q', '-o', 'DPkg::Lock::Timeout=300'], options);
	return (await runAloud('apt-get', args, options)) === 0;
}

/**
 * The PostgreSQL programs, installed from Debian when they are missing and this process may.
 * @throws SetUpError that says what to install.
 */
export async function requirePostgres(say: (line: string) => void): Promise<string> {
	const found = postgresPrograms();
	if (found) return found;
	if (isRoot()) {
		// Debian's package would start a cluster of its own on the standard port.
		const folder = '/etc/postgresql-common';
		mkdirSync(folder, { recursive: true });
		const file = join(folder, 'createcluster.conf');
		if (!existsSync(file)) writeFileSync(file, 'create_main_cluster = false\n');
	}
	await install(['postgresql'], say);
	const now = postgresPrograms();
	if (now) return now;
	throw new SetUpError(
		'PostgreSQL (13 or newer) is missing. Install it and run this again:\n' +
			'    sudo apt-get install postgresql\n' +
			'or set DATABASE_URL to a database that you already have, or POSTGRES_BIN to the folder of its programs.'
	);
}

/** Path of a Chromium, installed from Debian when missing and allowed; needed by the tests only. */
export async function requireChromium(say: (line: string) => void): Promise<string> {
	const find = () =>
		[process.env.CHROMIUM_PATH, '/usr/bin/chromium', '/usr/bin/chromium-browser'].find(
			(path) => path && existsSync(path)
		);
	const found = find();
	if (found) return found;
	await install(['chromium'], say);
	const now = find();
	if (now) return now;
	throw new SetUpError(
		'Chromium is missing; the browser tests need it. Install it and run this again:\n' +
			'    sudo apt-get install chromium\n' +
			'or set CHROMIUM_PATH.'
	);
}
