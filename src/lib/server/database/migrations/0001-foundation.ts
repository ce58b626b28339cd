import type { QueryInterface } from 'sequelize';

// One string, sent as one query: PostgreSQL runs it as one transaction.
const UP = `
CREATE EXTENSION IF NOT EXISTS citext;

CREATE TABLE "user" (
	id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
	email citext NOT NULL UNIQUE CHECK (length(email) BETWEEN 3 AND 254 AND position('@' in email) > 1),
	name text NOT NULL CHECK (length(btrim(name)) BETWEEN 1 AND 120),
	role text NOT NULL CHECK (role IN ('student', 'instructor', 'admin')),
	password_hash text CHECK (length(password_hash) = 60),
	session_version integer NOT NULL DEFAULT 1 CHECK (session_version >= 1),
	deactivated_at timestamptz,
	created_at timestamptz NOT NULL DEFAULT now(),
	updated_at timestamptz NOT NULL DEFAULT now()
);
CREATE INDEX user_active_admin ON "user" (id) WHERE role = 'admin' AND deactivated_at IS NULL;

CREATE TABLE class (
	id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
	name text NOT NULL CHECK (length(btrim(name)) BETWEEN 1 AND 120),
	starts_on date,
	ends_on date,
	join_link_version integer NOT NULL DEFAULT 1 CHECK (join_link_version >= 1),
	archived_at timestamptz,
	created_at timestamptz NOT NULL DEFAULT now(),
	updated_at timestamptz NOT NULL DEFAULT now(),
	CONSTRAINT class_dates CHECK (ends_on >= starts_on)
);

CREATE TABLE membership (
	id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
	class_id uuid NOT NULL REFERENCES class (id) ON DELETE CASCADE,
	user_id uuid NOT NULL REFERENCES "user" (id) ON DELETE CASCADE,
	role text NOT NULL CHECK (role IN ('instructor', 'student')),
	joined_at timestamptz NOT NULL DEFAULT now(),
	left_at timestamptz CHECK (left_at >= joined_at),
	UNIQUE (class_id, user_id)
);
CREATE INDEX membership_user ON membership (user_id, role) WHERE left_at IS NULL;

CREATE TABLE invitation (
	id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
	class_id uuid NOT NULL REFERENCES class (id) ON DELETE CASCADE,
	email citext NOT NULL CHECK (length(email) BETWEEN 3 AND 254),
	token_hash text NOT NULL UNIQUE CHECK (token_hash ~ '^[0-9a-f]{64}$'),
	invited_by uuid REFERENCES "user" (id) ON DELETE SET NULL,
	expires_at timestamptz NOT NULL,
	accepted_at timestamptz,
	accepted_by uuid REFERENCES "user" (id) ON DELETE SET NULL,
	revoked_at timestamptz,
	created_at timestamptz NOT NULL DEFAULT now(),
	CONSTRAINT invitation_lifetime CHECK (expires_at > created_at),
	CONSTRAINT invitation_one_end CHECK (accepted_at IS NULL OR revoked_at IS NULL)
);
CREATE INDEX invitation_class ON invitation (class_id, created_at DESC);

CREATE TABLE password_reset (
	id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
	user_id uuid NOT NULL REFERENCES "user" (id) ON DELETE CASCADE,
	token_hash text NOT NULL UNIQUE CHECK (token_hash ~ '^[0-9a-f]{64}$'),
	purpose text NOT NULL CHECK (purpose IN ('reset', 'welcome')),
	expires_at timestamptz NOT NULL,
	used_at timestamptz,
	created_at timestamptz NOT NULL DEFAULT now(),
	CONSTRAINT password_reset_lifetime CHECK (expires_at > created_at)
);
CREATE INDEX password_reset_user ON password_reset (user_id) WHERE used_at IS NULL;

CREATE TABLE mail_outbox (
	id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
	kind text NOT NULL CHECK (kind IN ('invitation', 'reset', 'welcome', 'notice')),
	recipient citext NOT NULL CHECK (length(recipient) BETWEEN 3 AND 254),
	subject text NOT NULL CHECK (length(subject) BETWEEN 1 AND 250),
	text_body text,
	html_body text,
	attempts integer NOT NULL DEFAULT 0 CHECK (attempts >= 0),
	next_attempt_at timestamptz NOT NULL DEFAULT now(),
	sent_at timestamptz,
	gave_up_at timestamptz,
	last_error text,
	created_at timestamptz NOT NULL DEFAULT now(),
	CONSTRAINT mail_outbox_one_end CHECK (sent_at IS NULL OR gave_up_at IS NULL),
	CONSTRAINT mail_outbox_body CHECK (text_body IS NOT NULL OR sent_at IS NOT NULL OR gave_up_at IS NOT NULL)
);
CREATE INDEX mail_outbox_due ON mail_outbox (next_attempt_at) WHERE sent_at IS NULL AND gave_up_at IS NULL;
CREATE INDEX mail_outbox_newest ON mail_outbox (created_at DESC);

CREATE TABLE audit_entry (
	id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
	actor_id uuid REFERENCES "user" (id) ON DELETE SET NULL,
	action text NOT NULL CHECK (action ~ '^[a-z_]+\\.[a-z_]+$'),
	subject_type text,
	subject_id text,
	detail jsonb NOT NULL DEFAULT '{}',
	created_at timestamptz NOT NULL DEFAULT now(),
	CONSTRAINT audit_entry_subject CHECK ((subject_type IS NULL) = (subject_id IS NULL))
);
CREATE INDEX audit_entry_newest ON audit_entry (created_at DESC, id);

CREATE TABLE tolerance_set (
	id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
	class_id uuid REFERENCES class (id) ON DELETE CASCADE,
	level text NOT NULL CHECK (level IN ('learning', 'working', 'concert')),
	in_force_from timestamptz NOT NULL DEFAULT now(),
	fork_cents real NOT NULL CHECK (fork_cents > 0 AND fork_cents <= 50),
	temperament_cents real NOT NULL CHECK (temperament_cents > 0 AND temperament_cents <= 50),
	low_and_sixth_octave_cents real NOT NULL CHECK (low_and_sixth_octave_cents > 0 AND low_and_sixth_octave_cents <= 50),
	seventh_octave_cents real NOT NULL CHECK (seventh_octave_cents > 0 AND seventh_octave_cents <= 50),
	unison_cents real NOT NULL CHECK (unison_cents > 0 AND unison_cents <= 50),
	moved_by_blows_cents real NOT NULL CHECK (moved_by_blows_cents > 0 AND moved_by_blows_cents <= 50),
	created_by uuid REFERENCES "user" (id) ON DELETE SET NULL
);
CREATE UNIQUE INDEX tolerance_set_in_force ON tolerance_set
	(COALESCE(class_id, '00000000-0000-0000-0000-000000000000'), in_force_from);

-- The house set: "learning" (common practice, no source).
INSERT INTO tolerance_set (level, in_force_from, fork_cents, temperament_cents,
	low_and_sixth_octave_cents, seventh_octave_cents, unison_cents, moved_by_blows_cents)
VALUES ('learning', '2000-01-01T00:00:00Z', 2, 2, 4, 8, 1, 1);

-- Kept by the rate limiter; the shape is its own.
CREATE TABLE rate_limit (
	key varchar(255) PRIMARY KEY,
	points integer NOT NULL DEFAULT 0,
	expire bigint
);
CREATE INDEX rate_limit_expire ON rate_limit (expire);
`;

const DOWN = `
DROP TABLE rate_limit, tolerance_set, audit_entry, mail_outbox, password_reset, invitation,
	membership, class, "user";
DROP EXTENSION citext;
`;

export async function up(queryInterface: QueryInterface): Promise<void> {
	await queryInterface.sequelize.query(UP);
}

export async function down(queryInterface: QueryInterface): Promise<void> {
	await queryInterface.sequelize.query(DOWN);
}
