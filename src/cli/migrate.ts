/**
 * Brings the database named by DATABASE_URL forward (`up`, the default), one step back (`down`) or
 * all the way back (`to-nothing`). Prints the steps that were run.
 */
import { migrate } from '../lib/server/database/migrate';

const direction = process.argv[2] ?? 'up';
const url = process.env.DATABASE_URL;

function refuse(message: string): never {
	console.error(message);
	process.exit(2);
}

if (direction !== 'up' && direction !== 'down' && direction !== 'to-nothing') {
	refuse(`Unknown direction "${direction}": up, down or to-nothing.`);
}
if (!url) refuse('Set DATABASE_URL to the database to migrate.');

try {
	const done = await migrate(url, direction);
	for (const name of done) console.log(`${direction === 'up' ? 'applied' : 'taken back'} ${name}`);
	if (done.length === 0) console.log('nothing to do');
} catch (problem) {
	// The whole error may carry a connection string.
	console.error(problem instanceof Error ? problem.message : 'Migration failed.');
	process.exit(1);
}
