/**
 * `npm run --silent bench [-- all|audio|meter|targets|server|pages] [--quick]`: prints one JSON object
 * with the machine and a line per figure. Exit 0 even when a bar is missed.
 */
import { cpus, totalmem } from 'node:os';
import type { BenchLine } from './bench/line';

type Room = (quick: boolean) => Promise<BenchLine[]>;

const ROOMS: Record<string, () => Promise<{ lines: Room }>> = {
	audio: () => import('./bench/audio'),
	meter: () => import('./bench/meter'),
	targets: () => import('./bench/targets'),
	server: () => import('./bench/server'),
	pages: () => import('./bench/pages')
};

function machine() {
	return {
		processor: cpus()[0]?.model ?? 'unknown',
		cores: cpus().length,
		memoryGiB: Math.round(totalmem() / 2 ** 30),
		node: process.version
	};
}

async function main(args: string[]): Promise<number> {
	const quick = args.includes('--quick');
	const wanted = args.filter((arg) => !arg.startsWith('--'));
	const unknown = wanted.filter((name) => name !== 'all' && !(name in ROOMS));
	if (unknown.length > 0) {
		process.stderr.write(
			`Unknown part "${unknown[0]}": choose all, ${Object.keys(ROOMS).join(', ')}.\n`
		);
		return 2;
	}
	const names = wanted.length === 0 || wanted.includes('all') ? Object.keys(ROOMS) : wanted;
	const lines: BenchLine[] = [];
	for (const name of names) {
		const room = await ROOMS[name]();
		lines.push(...(await room.lines(quick)));
	}
	process.stdout.write(JSON.stringify({ machine: machine(), lines }, null, '\t') + '\n');
	return 0;
}

process.exitCode = await main(process.argv.slice(2));
