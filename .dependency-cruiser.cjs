/**
 * The walls between the rooms (map of the rooms: DEVELOPERS.md). Arrows go one way:
 * http -> services -> {db, access, engine, storage, jobs' queue}; jobs -> services, engine, reading, linalg.
 * Checked by npm test; tests/unit/architecture sees to it that the checker really looks at every file.
 */

/** The pattern of a folder or, with an extension, of a file. */
function at(place) {
  return /\.tsx?$/.test(place) ? `^${place.replace('.', '\\.')}$` : `^${place}/`;
}

/** Files of the room `from` may import no file of server/ or src/ outside the rooms `to` (their own included). */
function room(from, to, comment, except = []) {
  return {
    name: `${from.replaceAll('/', '-')}-imports`,
    comment,
    severity: 'error',
    from: { path: at(from), pathNot: except.map(at) },
    to: { path: '^(server|src)/', pathNot: [from, ...to].map(at) },
  };
}

/** Only the rooms `rooms` may import the packages or their types. */
function onlyIn(packages, rooms, comment) {
  return {
    name: `${packages[0].replaceAll('/', '-')}-stays-in-its-room`,
    comment,
    severity: 'error',
    from: { path: '^server/', pathNot: [...rooms, 'server/setup'].map(at) },
    to: { path: packages.map((each) => `(^|/)node_modules/(@types/)?${each}/`) },
  };
}

const contract = 'server/contract';

module.exports = {
  forbidden: [
    room('server/contract', [], 'The contract is what both sides share: it knows neither of them.'),
    room(
      'server/engine',
      [contract],
      'The engine is pure and runs in server, worker and command line alike: hand it plain data.',
    ),
    room(
      'server/linalg',
      [contract, 'server/engine'],
      'Linear algebra is one small interface over a native library: it knows no room that uses it.',
    ),
    room(
      'server/reading',
      [contract, 'server/engine'],
      'Reading runs in its own process on hostile files: it must drag nothing else into it.',
    ),
    room('server/storage', [contract], 'Storage keeps bytes by hash and knows nothing of what they mean.'),
    room(
      'server/mail',
      [contract, 'server/config.ts'],
      'Mail writes and sends letters; services say when and to whom.',
    ),
    room('server/db', [contract], 'Repositories hold SQL and no judgement: decisions belong to services.'),
    room(
      'server/access',
      [contract, 'server/db', 'server/mail', 'server/config.ts'],
      'Access decides who may do what; what is then done belongs to services.',
    ),
    room(
      'server/services',
      [
        contract,
        'server/db',
        'server/access',
        'server/engine',
        'server/storage',
        'server/mail',
        'server/jobs/queue.ts',
        'server/config.ts',
      ],
      'Services are what the product does, called by http, jobs and command line: heavy work goes through jobs/queue.ts into a job.',
    ),
    room(
      'server/jobs',
      [contract, 'server/services', 'server/engine', 'server/reading', 'server/linalg'],
      'Job handlers call services for anything that is stored; database and storage are reached through them.',
      ['server/jobs/queue.ts'],
    ),
    room(
      'server/jobs/queue.ts',
      [contract, 'server/db'],
      'The queue writes a job in the transaction of the service that asks for it, and knows no handler.',
    ),
    room(
      'server/http',
      [contract, 'server/services', 'server/access', 'server/config.ts'],
      'A router parses, authorises, calls one service and answers: move anything else into the service.',
    ),
    room(
      'server/cli',
      [
        contract,
        'server/engine',
        'server/reading',
        'server/linalg',
        'server/services',
        'server/db',
        'server/config.ts',
      ],
      'The command line works on files without a server; what needs the database goes through services.',
    ),
    {
      name: 'repositories-belong-to-services',
      comment:
        'Only services call repositories, so that permission, transaction and audit row cannot be gone around: call the service.',
      severity: 'error',
      from: { path: '^(server|src)/', pathNot: '^server/(services|db)/' },
      to: { path: '^server/db/repositories/' },
    },
    {
      name: 'nobody-imports-http',
      comment: 'Only the wiring mounts http; what others want from it belongs into a service or the contract.',
      severity: 'error',
      from: { path: '^server/', pathNot: '^server/(http/|(app|main)\\.ts$)' },
      to: { path: '^server/http/' },
    },
    {
      name: 'nobody-imports-the-wiring',
      comment:
        'main.ts, worker.ts and app.ts put the rooms together and are put together by nobody: take what is needed as a parameter.',
      severity: 'error',
      from: { path: '^(server|src)/', pathNot: '^server/(main|worker|app)\\.ts$' },
      to: { path: '^server/(main|worker|app)\\.ts$' },
    },
    {
      name: 'engine-is-pure',
      comment:
        'No input or output, clock, process or package in the engine: pass in what it needs (linear algebra: server/linalg).',
      severity: 'error',
      from: { path: '^server/engine/' },
      to: { dependencyTypes: ['core', 'npm', 'npm-dev', 'npm-optional', 'npm-peer', 'npm-no-pkg', 'npm-unknown'] },
    },
    onlyIn(
      ['h5wasm', 'h5wasm-plugins'],
      ['server/reading', 'server/demo'],
      'h5wasm must not meet a hostile file outside the guarded process: ask server/reading.',
    ),
    onlyIn(
      ['koffi', 'ml-matrix'],
      ['server/linalg'],
      'koffi checks nothing, so every call goes through the checked wrappers of server/linalg.',
    ),
    onlyIn(['nodemailer'], ['server/mail'], 'Letters are sent through server/mail, which demo and tests can open.'),
    onlyIn(
      ['pg', 'drizzle-orm', 'drizzle-zod'],
      ['server/db', 'server/services', 'server/access', 'server/jobs/queue.ts'],
      'SQL stays in repositories and the transactions of services.',
    ),
    onlyIn(
      ['graphile-worker'],
      ['server/jobs', 'server/db', 'server/worker.ts'],
      'The queue has one small interface, server/jobs/queue.ts.',
    ),
    onlyIn(
      ['better-auth', '@better-auth/api-key'],
      ['server/access'],
      'Sessions and tokens are known through server/access.',
    ),
    onlyIn(
      ['express', 'express-rate-limit', 'helmet', 'pino-http'],
      ['server/http', 'server/app.ts', 'server/main.ts', 'server/access'],
      'Nothing but http knows of requests: services take plain values.',
    ),
    {
      name: 'pages-know-only-the-contract',
      comment: 'The browser shares #contract with the server and nothing else: add what is needed there.',
      severity: 'error',
      from: { path: '^src/' },
      to: { path: '^server/', pathNot: '^server/contract/' },
    },
    {
      name: 'server-knows-no-pages',
      comment: 'The server serves the built pages as files and knows nothing of their source.',
      severity: 'error',
      from: { path: '^server/' },
      to: { path: '^src/' },
    },
    {
      name: 'features-are-strangers',
      comment:
        'A feature never imports another one: share through src/components, src/api or another folder beside features/, or link to its page.',
      severity: 'error',
      from: { path: '^src/features/([^/]+)/' },
      to: { path: '^src/features/', pathNot: '^src/features/$1/' },
    },
    {
      name: 'features-do-not-know-the-app',
      comment:
        'src/app knows all features, so none of them may import it back: take what is needed through a hook of src/api or a prop.',
      severity: 'error',
      from: { path: '^src/', pathNot: '^src/(app/|main\\.tsx$)' },
      to: { path: '^src/app/' },
    },
    {
      name: 'shared-parts-know-no-feature',
      comment: 'What stands outside features/ and app/ is used by every feature: pass the difference in as a prop.',
      severity: 'error',
      from: { path: '^src/', pathNot: '^src/(features/|app/|main\\.tsx$)' },
      to: { path: '^src/features/' },
    },
    {
      name: 'components-know-no-domain',
      comment: 'A component without the domain draws what it is given: map contract types to props in the feature.',
      severity: 'error',
      from: { path: '^src/components/' },
      to: { path: '^src/', pathNot: '^src/components/' },
    },
    {
      name: 'no-circle',
      comment:
        'Files that import each other in a circle cannot be understood or tested one by one: move the shared part into a third.',
      severity: 'error',
      from: {},
      to: { circular: true, viaOnly: { dependencyTypesNot: ['type-only'] } },
    },
    {
      name: 'resolvable',
      comment: 'An import that leads nowhere fails only when it is reached: correct the path or install the package.',
      severity: 'error',
      from: {},
      to: { couldNotResolve: true },
    },
    {
      name: 'no-development-package-in-the-server',
      comment: 'The server also runs where development packages are left out: make it a dependency or do without.',
      severity: 'error',
      // The command's launcher takes tsx only where it runs from the sources.
      from: { path: '^server/', pathNot: '^server/(setup/|cli/pennyweight\\.js$)' },
      to: { dependencyTypes: ['npm-dev', 'npm-no-pkg'], dependencyTypesNot: ['type-only'] },
    },
    {
      name: 'no-tests-in-the-product',
      comment: 'The product must not need its tests: move the shared part out of tests/.',
      severity: 'error',
      from: { path: '^(server|src)/', pathNot: '\\.test\\.tsx?$' },
      to: { path: '^tests/' },
    },
    {
      name: 'setup-stands-alone',
      comment: 'server/setup runs before any package is installed: node: imports only.',
      severity: 'error',
      from: { path: '^server/setup/' },
      to: { pathNot: '^server/setup/', dependencyTypesNot: ['core'], dynamic: false },
    },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    tsConfig: { fileName: 'tsconfig.json' },
    // Imports of types count as well: a room that needs another room's types depends on it.
    tsPreCompilationDeps: true,
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['import', 'types', 'node', 'default'],
      mainFields: ['module', 'main', 'types'],
    },
  },
};
