import { startScratchCluster, type Cluster } from '../../src/cli/cluster';
import { migrate } from '../../src/lib/server/database/migrate';

let cluster: Cluster | undefined;

/**
 * Before the integration tests: a PostgreSQL of its own with the newest schema, thrown away
 * afterwards. Test workers inherit the environment set here.
 */
export async function setup(): Promise<void> {
	cluster = await startScratchCluster();
	await migrate(cluster.url, 'up');
	process.env.DATABASE_URL = cluster.url;
	process.env.AUTH_SECRET = 'only-for-tests-0123456789-0123456789-abcdef';
	process.env.ORIGIN = 'http://localhost:3000';
	process.env.SMTP_URL = 'smtp://127.0.0.1:1';
	process.env.LOG_LEVEL = 'silent';
}

export async function teardown(): Promise<void> {
	await cluster?.stop({ remove: true });
}
