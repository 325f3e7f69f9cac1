const { join } = require('node:path');

/** Who may import whom. Each folder names what it may reach; whatever it does not name is forbidden. */

/** A folder and the paths that it alone may import; packages have rules of their own below. */
const only = (name, from, to, comment, { except = [] } = {}) => ({
  name,
  comment,
  severity: 'error',
  from: { path: from, pathNot: except },
  to: { path: '^(api|db|worker|ui|fixtures|test)/', pathNot: to },
});

/** A package that a few files hide from all others. */
const hidden = (name, packages, holders, comment) => ({
  name,
  comment,
  severity: 'error',
  from: { pathNot: holders },
  to: { path: packages.map((p) => `(^|/)node_modules/${p}/|^${p}($|/)`) },
});

const SPEC = '\\.(spec|contract-suite|harness)\\.ts$';
const VOCABULARY = '^api/domain/vocabulary(\\.ts|/)';
const MAIN_FILES = ['^api/(app|main)\\.ts$', '^api/start/', '^worker/main\\.ts$', '^worker/.*thread\\.ts$'];

module.exports = {
  forbidden: [
    { name: 'no-cycles', comment: 'A circle of files cannot be read, nor changed, one at a time.', severity: 'error', from: {}, to: { circular: true, viaOnly: { dependencyTypesNot: ['type-only'] } } },
    { name: 'nobody-imports-tests', comment: 'Tests look in from outside.', severity: 'error', from: { pathNot: '^test/' }, to: { path: '^test/' } },
    { name: 'nobody-imports-specs', severity: 'error', comment: 'A spec is run, not used.', from: {}, to: { path: '\\.spec\\.ts$' } },
    { name: 'resolvable', severity: 'error', comment: 'What is imported must be there.', from: {}, to: { couldNotResolve: true } },

    only('domain', '^api/domain/', ['^api/domain/'], 'The domain knows nothing of the edges.', { except: [SPEC] }),
    only('contract', '^api/contract/', ['^api/contract/', VOCABULARY], 'The contract is read in a browser too.'),
    {
      name: 'feature',
      comment: 'A feature is itself, the contract, the domain, http and the queue’s port; another feature is reached through the domain.',
      severity: 'error',
      from: { path: '^api/features/([^/]+)/', pathNot: [SPEC] },
      to: { path: '^(api|db|worker|ui|fixtures|test)/', pathNot: ['^api/features/$1/', '^api/(contract|domain|http|queue|config)/'] },
    },
    only('http', '^api/http/', ['^api/(http|config|contract|domain)/'], 'What every route shares knows no feature.', { except: [SPEC] }),
    only('config', '^api/config/', ['^api/(config|contract|domain)/'], 'Settings are read once, and know nothing.'),
    only('queue', '^api/queue/', ['^api/(queue|contract|domain)/'], 'The queue only wakes; it does not know what it wakes.'),
    only('api-not-worker', '^api/', ['^(api|db|fixtures)/'], 'The API and the worker meet in api/start alone.', { except: ['^api/start/', SPEC] }),
    {
      name: 'api-not-db',
      comment: 'Use cases see ports; only the main files give them their stores.',
      severity: 'error',
      from: { path: '^api/', pathNot: [...MAIN_FILES, SPEC] },
      to: { path: '^db/' },
    },
    only('db', '^db/', ['^db/', '^api/domain/', '^api/contract/', '^api/features/[^/]+/port\\.ts$', '^fixtures/demo/scenario\\.ts$'], 'The database side knows the domain and, as types, what is read.', { except: [SPEC] }),
    {
      name: 'db-types-of-the-edge',
      comment: 'Of the contract and of a feature’s port the database side takes types only.',
      severity: 'error',
      from: { path: '^db/', pathNot: [SPEC] },
      to: { path: '^api/(contract|features)/', dependencyTypesNot: ['type-only'] },
    },
    { name: 'migrations', severity: 'error', comment: 'A migration must mean the same in ten years.', from: { path: '^db/migrations/(?!index)' }, to: { path: '^(api|db|worker|fixtures)/' } },
    only('engine', '^worker/engine/', ['^worker/engine/'], 'The engine is pure.', { except: [SPEC] }),
    {
      name: 'engine-packages',
      comment: 'The engine takes special functions from @stdlib and, where no bits are frozen, jstat; nothing of Node’s.',
      severity: 'error',
      from: { path: '^worker/engine/', pathNot: [SPEC] },
      to: { pathNot: ['^worker/engine/', '(^|/)node_modules/(@stdlib|jstat)/', '^(@stdlib/|jstat$)'] },
    },
    only('jobs', '^worker/jobs/', ['^worker/(jobs|engine|mail)/', '^api/(contract|domain|queue)/'], 'A job computes and tells; it stores through ports.', { except: [SPEC, ...MAIN_FILES] }),
    {
      name: 'jobs-mail-port',
      comment: 'Jobs send through the port of mail, not through its adapters.',
      severity: 'error',
      from: { path: '^worker/jobs/', pathNot: [SPEC] },
      to: { path: '^worker/mail/smtp[^/]*\\.ts$' },
    },
    only('mail', '^worker/mail/', ['^worker/mail/', '^api/domain/', '^api/contract/'], 'Mail knows what it says, not who asked.', { except: [SPEC] }),
    { name: 'mail-contract-types', severity: 'error', comment: 'Of the contract mail takes types only.', from: { path: '^worker/mail/', pathNot: [SPEC] }, to: { path: '^api/contract/', dependencyTypesNot: ['type-only'] } },
    only('ui', '^ui/', ['^ui/', '^api/contract/', VOCABULARY, '^worker/engine/'], 'Screens know the contract and the words.'),
    {
      name: 'ui-engine',
      comment: 'Screens take the engine’s types; its code runs in a web worker alone.',
      severity: 'error',
      from: { path: '^ui/', pathNot: ['\\.worker\\.ts$', SPEC] },
      to: { path: '^worker/engine/', dependencyTypesNot: ['type-only'] },
    },
    {
      name: 'ui-features-apart',
      comment: 'What two features share lies in ui/src/app/shared.',
      severity: 'error',
      from: { path: '^ui/src/app/features/([^/]+)/' },
      to: { path: '^ui/src/app/features/', pathNot: '^ui/src/app/features/$1/' },
    },
    {
      name: 'ui-shared-below',
      comment: 'What all features use knows none of them.',
      severity: 'error',
      from: { path: '^ui/src/app/(shared|core)/' },
      to: { path: '^ui/src/app/features/' },
    },
    {
      name: 'no-openapi-in-the-browser',
      comment: 'The making of the API’s description is for the server, directly or by way of others.',
      severity: 'error',
      from: { path: '^ui/' },
      to: { path: '@asteasolutions', reachable: true },
    },

    hidden('bullmq', ['bullmq'], ['^api/queue/bullmq[^/]*\\.ts$', '^test/', 'node_modules'], 'One file knows which queue it is.'),
    hidden('nodemailer', ['nodemailer'], ['^worker/mail/smtp[^/]*\\.ts$', 'node_modules'], 'One file knows how mail travels.'),
    hidden('database-packages', ['typeorm', 'pg', 'pg-copy-streams'], ['^db/', '^test/', 'node_modules'], 'The ORM stops at the repository.'),
    hidden('server-packages', ['express', 'multer', 'passport', 'passport-jwt', 'helmet', 'cookie-parser'], ['^api/', '^test/', 'node_modules'], 'HTTP stops at the API.'),
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    exclude: { path: '^(dist|coverage|\\.angular)/' },
    tsPreCompilationDeps: true,
    // The screens have short names for the contract; this file says them from the root, as the cruiser wants them.
    tsConfig: { fileName: join(__dirname, 'tsconfig.imports.json') },
    enhancedResolveOptions: { exportsFields: ['exports'], conditionNames: ['import', 'require', 'node', 'default', 'types'], extensions: ['.ts', '.js', '.mjs', '.cjs', '.json'] },
  },
};
