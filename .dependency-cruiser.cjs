// What: who may import whom, one rule a row of the table in DEVELOPERS.md; a rule's comment is what a developer reads when it
// fails. Must not: grow exceptions for a single file; move the file, or take the decision and change the row.

/** Everything of ours; what comes from node_modules has rules of its own below. */
const ours = '^(app|components|shared|server|db|locales|tests|scripts)/';

/** One row: files in `from` may import of ours only what `may` lists. In `may`, $1 is what the brackets of `from` matched. */
function row(name, from, may, comment, more = {}) {
  return { name, severity: 'error', comment, from: { path: from, ...more }, to: { path: ours, pathNot: may } };
}

const shared = '^shared/';
const ui = '^components/ui/';
const runtime = '^components/runtime/';
/** Files straight in server/ that everybody in it may use: the action's form, clock, words, hashes; not those that know every action. */
const ground = '^server/(?!(main|api|jobs|queue|transact)\\.ts$)[^/]+\\.ts$';

module.exports = {
  forbidden: [
    row(
      'doors',
      '^app/',
      ['^app/', '^components/(features|layout|runtime)/'],
      'A door shows one screen. It may know features, layout and runtime; everything else belongs into the screen it opens.',
    ),
    row(
      'ui',
      ui,
      [ui],
      'components/ui draws what it is given: no words, no rules, no fetching, so nothing else of ours.',
    ),
    row(
      'runtime',
      runtime,
      [runtime, shared, '^locales/'],
      "components/runtime is the browser's own ground (clock, calls, device, words): it knows shared/ and locales/ only, no screen.",
    ),
    row(
      'forms and layout',
      '^components/(forms|layout)/',
      ['^components/$1/', ui, runtime, '^shared/(values|contracts)/'],
      'Forms and layout build on ui and runtime, and know the values and contracts they show; rules and features are above them.',
    ),
    row(
      'features',
      '^components/features/([^/]+)/',
      [
        '^components/features/$1/',
        '^components/features/[^/]+/pictures/',
        '^components/(ui|forms|runtime|layout)/',
        shared,
      ],
      "A feature does not reach into another one: it may use the other's pictures (they fetch nothing); what both need goes down a floor.",
    ),
    row('values', '^shared/values/', ['^shared/values/'], 'shared/values is the ground: it imports nothing of ours.'),
    row(
      'rules, estimates, contracts',
      '^shared/(rules|estimates|contracts)/',
      ['^shared/$1/', '^shared/values/'],
      "Shape is the contract's, limits are the rule's, so that a refusal can name its layer: they share values and do not import each other.",
    ),
    row(
      'schema',
      '^db/schema/',
      ['^db/schema/', '^shared/values/', '^shared/rules/ceilings\\.ts$'],
      'A table knows values and the ceilings (its CHECKs use the same constants); decisions stay in shared/rules.',
    ),
    row(
      'queries',
      '^db/queries/',
      ['^db/queries/', '^db/schema/', '^db/client\\.ts$', '^shared/values/'],
      'A query reads and writes; it decides nothing, so it knows tables and values only.',
    ),
    row(
      'cellar',
      '^db/[^/]+\\.ts$',
      ['^db/', '^shared/values/'],
      'db/client.ts and db/migrate.ts open the database; they know nothing above it.',
    ),
    row(
      'actions',
      '^server/features/([^/]+)/',
      ['^server/features/$1/', ground, '^server/transact\\.ts$', '^db/queries/', '^db/client\\.ts$', shared],
      'An action loads, asks, writes: queries, rules, contracts. Another feature, mail, http or the queue would write what nobody sees in this action; use tx.tell, or share the rule or the query.',
    ),
    row(
      'transact',
      '^server/transact\\.ts$',
      [
        ground,
        '^server/(transact|queue)\\.ts$',
        '^db/(client|sql-state)\\.ts$',
        '^db/queries/(audit|house|clock|reach|site-contact)\\.ts$',
        shared,
      ],
      'transact owns the transaction: client, audit, outbox, keys, queue, clock; what a feature does is not its business.',
    ),
    row(
      'http, auth, mail',
      '^server/(http|auth|mail)/',
      [
        ...['^server/$1/', '^server/auth/', ground, '^server/transact\\.ts$', '^db/queries/(account|house)\\.ts$'],
        ...['^db/(client|sql-state)\\.ts$', '^db/schema/account\\.ts$', '^locales/', shared],
      ],
      'http, auth and mail carry things in and out. They know sign-in, accounts and the outbox, not what a feature does.',
    ),
    row(
      'server ground',
      '^server/(?!(main|api|jobs|transact)\\.ts$)[^/]+\\.ts$',
      [ground, '^server/(queue|transact)\\.ts$', '^db/queries/', '^db/client\\.ts$', '^locales/', shared],
      'Files straight in server/ are used by all of it; only main, api, jobs and the demo know the actions.',
    ),
    row(
      'server top',
      '^server/((main|api|jobs)\\.ts$|demo/|house/open-house\\.ts$)',
      ['^server/', '^db/', '^locales/', shared],
      'Even the files that know every action know nothing of the pages.',
    ),
    row('words', '^locales/', ['^locales/'], 'locales/ holds sentences, no code.'),
    {
      name: 'nothing imports tests',
      severity: 'error',
      comment: 'Tests and scripts may import anything; the product imports neither.',
      from: { path: '^(app|components|shared|server|db|locales)/' },
      to: { path: '^(tests|scripts)/' },
    },

    {
      name: 'no rule for this place',
      severity: 'error',
      comment:
        'A file stands where the house has no room for it. Choose a folder from the table in DEVELOPERS.md, or decide about a new one.',
      from: {
        path: '^(components/(?!(ui|forms|runtime|layout|features)/)|shared/(?!(values|rules|contracts|estimates)/)|server/(?!(http|auth|mail|demo|features|house)/)[^/]+/)',
      },
      to: {},
    },

    {
      name: 'sign-in tables',
      severity: 'error',
      comment: 'The sign-in library wants the account tables themselves (D11); http and mail ask by queries.',
      from: { path: '^server/(http|mail)/' },
      to: { path: '^db/schema/' },
    },
    {
      name: 'mail words',
      severity: 'error',
      comment: 'Of http, auth and mail only mail writes sentences, so only mail reads locales/.',
      from: { path: '^server/(http|auth)/' },
      to: { path: '^locales/' },
    },
    {
      name: 'only types of transact',
      severity: 'error',
      comment:
        'An action is handed its tx; it never opens a transaction, so it imports types of server/transact.ts only.',
      from: { path: '^server/(features|house)/(?!open-house)' },
      to: { path: '^server/transact\\.ts$', dependencyTypesNot: ['type-only'] },
    },
    {
      name: 'one door to the client',
      severity: 'error',
      comment:
        'Every write passes transact, which also writes the audit trail. Only it, sign-in (D11), migration and the start of the process use the database client itself.',
      from: {
        path: '^(server|db)/',
        pathNot:
          '^(server/transact\\.ts$|server/auth/|server/main\\.ts$|server/house/open-house\\.ts$|db/migrate\\.ts$)',
      },
      to: { path: '^db/client\\.ts$', dependencyTypesNot: ['type-only'] },
    },
    {
      name: 'one door to the arm',
      severity: 'error',
      comment:
        'Who reads the arm can unblind a study: db/queries/allocation.ts is for the permit and allocation actions only.',
      from: { path: '^(app|components|shared|server|db)/', pathNot: '^server/features/(permit|allocation)/' },
      to: { path: '^db/queries/allocation\\.ts$' },
    },

    {
      name: 'SQL only in db',
      severity: 'error',
      comment: 'SQL lives only in db/: only db/ imports drizzle-orm and pg.',
      from: { path: '^(app|components|shared|server|locales)/' },
      to: { path: '^node_modules/(drizzle-orm|pg)/' },
    },
    {
      name: 'one door to the queue',
      severity: 'error',
      comment: 'Only server/queue.ts imports pg-boss: it wakes workers, the outbox row is the record.',
      from: { path: '^(app|components|shared|server|db|locales)/', pathNot: '^server/queue\\.ts$' },
      to: { path: '^node_modules/pg-boss/' },
    },
    {
      name: 'one door to sign-in',
      severity: 'error',
      comment:
        'Only server/auth imports better-auth (and server/password.ts its hashing); everybody else gets an actor.',
      from: { path: '^(app|components|shared|server|db|locales)/', pathNot: '^server/(auth/|password\\.ts$)' },
      to: { path: '^node_modules/(better-auth|@better-auth)/' },
    },
    {
      name: 'shared is pure',
      severity: 'error',
      comment: 'shared/ gives the same answer in the browser and on the server: no library but zod and @noble/hashes (pure itself), nothing of Node.',
      from: { path: '^shared/' },
      to: { path: '^node_modules/', pathNot: '^node_modules/(zod|@noble/hashes)/' },
    },
    {
      name: 'shared without Node',
      severity: 'error',
      comment: 'shared/ gives the same answer in the browser and on the server: nothing of Node.',
      from: { path: '^shared/' },
      to: { dependencyTypes: ['core'] },
    },
    {
      name: 'pages without Node',
      severity: 'error',
      comment: 'Pages run in a browser, which has no Node modules.',
      from: { path: '^(app|components)/' },
      to: { dependencyTypes: ['core'] },
    },

    {
      name: 'no circles',
      severity: 'error',
      comment: 'Two files that need each other are one file, or a third one is missing below both.',
      from: {},
      to: { circular: true, viaOnly: { dependencyTypesNot: ['type-only'] } },
    },
    {
      name: 'known files only',
      severity: 'error',
      comment: 'The imported file does not exist, or its package is not in package.json.',
      from: {},
      to: { couldNotResolve: true },
    },
    {
      name: 'no borrowed packages',
      severity: 'error',
      comment: 'The package is there only because another one needs it; name it in package.json.',
      from: {},
      to: { dependencyTypes: ['npm-no-pkg', 'npm-unknown'] },
    },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'tsconfig.json' },
    combinedDependencies: false,
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['import', 'require', 'node', 'default', 'types'],
      extensions: ['.ts', '.tsx', '.d.ts', '.js', '.json'],
    },
    reporterOptions: { text: { highlightFocused: true } },
  },
};
