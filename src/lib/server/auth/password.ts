import bcrypt from 'bcryptjs';

/** 2^11 rounds: about a sixth of a second of one core. */
const COST = 11;
/** Same cost, for nobody: compared when there is no account, so that the answer takes as long. */
let nobody: Promise<string> | undefined;

/** The bcrypt hash of a password that has passed the rules. */
export function hashPassword(password: string): Promise<string> {
	return bcrypt.hash(password, COST);
}

/** Compares at the same cost whether or not there is a hash; without one the answer is false. */
export async function isPassword(password: string, hash: string | null): Promise<boolean> {
	nobody ??= bcrypt.hash('nobody has this password', COST);
	const matches = await bcrypt.compare(password, hash ?? (await nobody));
	return matches && hash !== null;
}

/** Makes the stand-in ready, so that the first stranger's answer takes no longer than the rest. */
export async function preparePasswords(): Promise<void> {
	await isPassword('', null);
}
