/**
 * Puts the demonstration (invented people with eight weeks of history) into the database named by
 * DATABASE_URL. Run again it changes nothing.
 */
import { closeDatabase } from '../lib/server/database';
import { DEMO_SIGN_INS, seedDemo } from '../lib/server/database/seeders';
import { measuredChecks } from './demo/string-checks';

try {
	const done = await seedDemo({ today: new Date(), measure: measuredChecks });
	console.log(done === 'present' ? 'The demonstration is there already.' : 'Demonstration ready.');
	for (const { role, name, email, password } of DEMO_SIGN_INS) {
		console.log(`${role.padEnd(11)} ${name.padEnd(22)} ${email.padEnd(40)} ${password}`);
	}
} catch (problem) {
	// The whole error may carry a connection string.
	console.error(problem instanceof Error ? problem.message : 'Seeding failed.');
	process.exitCode = 1;
} finally {
	await closeDatabase();
}
