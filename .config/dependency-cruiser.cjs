/**
 * Who may import whom. Each room lists what it may import besides itself; everything else of ours is
 * forbidden to it. The architecture test checks that the rules bite.
 */
const lib = (...rooms) => rooms.map((room) => `src/lib/${room}`);

/** A room that may import only the named rooms and packages. */
function room(name, from, allowed, extra = {}) {
	return {
		name,
		severity: 'error',
		from: { path: from, pathNot: ['\\.test\\.ts$', ...(extra.fromNot ?? [])] },
		to: {
			path: '^(src|tests|fixtures)/',
			pathNot: allowed.map((path) => `^${path}(/|\\.|$)`)
		}
	};
}

/** @type {import('dependency-cruiser').IConfiguration} */
module.exports = {
	forbidden: [
		{
			name: 'no-unresolved',
			comment: 'An unresolved import makes every other rule pass silently.',
			severity: 'error',
			from: {},
			to: {
				couldNotResolve: true,
				pathNot: [
					'^\\$app/',
					'^\\$env/',
					'^\\./\\$types',
					'^\\$service-worker',
					'\\?worker',
					'^virtual:'
				]
			}
		},
		{ name: 'no-cycles', severity: 'error', from: {}, to: { circular: true } },
		{
			name: 'lib-not-routes',
			severity: 'error',
			from: { path: '^src/lib/' },
			to: { path: '^src/(routes|cli)/' }
		},
		{
			name: 'product-not-tests',
			severity: 'error',
			from: { path: '^src/', pathNot: '\\.test\\.ts$' },
			to: { path: '^(tests|fixtures)/' }
		},
		{
			name: 'simulation-for-seeders-and-command-line-only',
			severity: 'error',
			from: {
				path: '^src/',
				pathNot: [
					'^src/lib/drills/simulation/',
					'^src/lib/server/database/seeders/',
					'^src/cli/',
					'\\.test\\.ts$'
				]
			},
			to: { path: '^src/lib/drills/simulation/' }
		},
		room('acoustics-imports-nothing', '^src/lib/acoustics/', lib('acoustics')),
		room('mechanics', '^src/lib/mechanics/', lib('mechanics', 'acoustics')),
		room('drills', '^src/lib/drills/', lib('drills', 'acoustics', 'mechanics')),
		room('course', '^src/lib/course/', lib('course', 'acoustics', 'drills')),
		room('synthesis', '^src/lib/synthesis/', lib('synthesis', 'acoustics', 'mechanics')),
		room('measurement', '^src/lib/measurement/', lib('measurement', 'acoustics')),
		room('offline', '^src/lib/offline/', lib('offline', 'drills', 'acoustics')),
		room(
			'server',
			'^src/lib/server/',
			lib(
				'server',
				'acoustics',
				'mechanics',
				'drills',
				'course',
				'measurement/dsp',
				'measurement/types'
			)
		),
		room('ui-knows-no-domain', '^src/lib/components/ui/', lib('components/ui')),
		room('components-not-server', '^src/lib/components/(?!ui/)', [
			...lib(
				'components',
				'acoustics',
				'mechanics',
				'drills',
				'course',
				'synthesis',
				'measurement',
				'offline',
				'assets'
			)
		]),
		{
			name: 'pages-not-server',
			severity: 'error',
			from: { path: '^src/routes/.*(\\+page|\\+layout|\\+error)(\\.ts|\\.svelte)$' },
			to: { path: '^src/lib/server/' }
		},
		{
			name: 'server-routes-thin',
			comment: 'Loads and endpoints call services; they never touch models, audio or components.',
			severity: 'error',
			from: { path: '^src/routes/.*(\\+page\\.server|\\+layout\\.server|\\+server)\\.ts$' },
			to: { path: '^src/lib/(server/(models|database)|synthesis|components|offline)/' }
		},
		{
			name: 'hooks-compose-only',
			severity: 'error',
			from: { path: '^src/hooks\\.server\\.ts$' },
			to: { path: '^src/lib/', pathNot: '^src/lib/server/hooks' }
		},
		{
			name: 'service-worker-offline-only',
			severity: 'error',
			from: { path: '^src/service-worker\\.ts$' },
			to: { path: '^src/lib/', pathNot: '^src/lib/offline/' }
		},
		{
			name: 'worklets-kernels-only',
			severity: 'error',
			from: { path: '\\.worklet\\.ts$' },
			to: { path: '^src/', pathNot: '^src/lib/(acoustics|mechanics|[a-z]+/dsp|[a-z]+/worklets)/' }
		},
		{
			name: 'workers-analyse-only',
			comment:
				'A worker may decode and analyse as well; it never opens a device or talks to the page.',
			severity: 'error',
			from: { path: '\\.worker\\.ts$' },
			to: {
				path: '^src/',
				pathNot:
					'^src/lib/(acoustics/|mechanics/|[a-z]+/dsp/|measurement/(types|decode|analysis)\\.ts$)'
			}
		},
		{
			name: 'command-line',
			severity: 'error',
			from: { path: '^src/cli/' },
			to: { path: '^src/(routes|lib/components)/' }
		}
	],
	options: {
		doNotFollow: { path: 'node_modules' },
		exclude: { path: ['^build/', '\\.svelte-kit'] },
		tsPreCompilationDeps: true,
		tsConfig: { fileName: '.config/tsconfig.depcruise.json' },
		enhancedResolveOptions: {
			extensions: ['.ts', '.svelte.ts', '.svelte', '.js', '.mjs', '.cjs', '.json', '.css'],
			exportsFields: ['exports'],
			conditionNames: ['svelte', 'import', 'node', 'default', 'types']
		}
	}
};
