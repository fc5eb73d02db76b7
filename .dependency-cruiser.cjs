/** Who may import what. The table with its reasons stands in DEVELOPERS.md; each rule here is one line of it. */

const npm = (...names) => names.map((name) => `(^|/)node_modules/${name}(/|$)`)
const anyNpm = '(^|/)node_modules/'
const forbid = (name, comment, from, to) => ({ name, comment, severity: 'error', from, to })

/** What a process starts with; everything else must be reachable from one of these. */
const entrances = [
  '^server/index\\.ts$',
  '^server/(commands|migrations|seeders|setup|workers)/',
  '^simulator/index\\.ts$',
  '^src/main\\.ts$',
  '\\.d\\.ts$',
]

const upperServer = '^server/(app\\.ts|index\\.ts|routes|sockets|commands|jobs|middleware|setup)'

/** Services that every other may use. */
const usedByAll = 'bus|audit|watchLog|problems|passwords|transaction'
/**
 * Services whose writes share a transaction with others: an imported file is stored with the record of it, a leased
 * e-mail with its link, a step of an escalation with its e-mail, a bulletin with its e-mail, an invitation with its e-mail, a session with the
 * code that opened it, a deployment under the lock of its station, an order to take a file in with the work of doing so.
 */
const together = {
  imports: 'readings',
  deliveries: 'receipts|people',
  deployments: 'stationSetUp',
  escalations: 'messages',
  alerts: 'limits',
  limits: 'alerts',
  notices: 'messages',
  bulletins: 'messages',
  observations: 'places',
  people: 'messages|sessions|secondFactor',
  sessions: 'secondFactor',
  configuration: 'settings',
  uploads: 'longJobs',
}

const serviceRules = [
  forbid(
    'services-apart',
    'A service calls another only where their writes share one transaction; other news goes over the bus.',
    { path: '^server/services/([^/.]+)', pathNot: `^server/services/(${Object.keys(together).join('|')})(/|\\.ts$)` },
    {
      path: '^server/services/',
      pathNot: ['^server/services/$1(/|\\.ts$)', `^server/services/(${usedByAll})(/|\\.ts$)`],
    },
  ),
  ...Object.entries(together).map(([name, others]) =>
    forbid(
      `service-${name}-with-its-own`,
      'Services that write together are named in this file.',
      { path: `^server/services/${name}(/|\\.ts$)` },
      { path: '^server/services/', pathNot: `^server/services/(${name}|${others}|${usedByAll})(/|\\.ts$)` },
    ),
  ),
]

module.exports = {
  forbidden: [
    forbid('no-cycles', 'Files that need each other are one file or want a third.', {}, { circular: true }),
    forbid(
      'no-orphans',
      'A file that nothing leads to is not part of the program.',
      { orphan: true, pathNot: [...entrances, '^tests/'] },
      {},
    ),
    forbid(
      'no-dead-files',
      'What no entrance reaches is not part of the program.',
      { path: entrances },
      {
        path: '^(shared|server|simulator|src)/',
        pathNot: entrances,
        reachable: false,
      },
    ),
    forbid('all-resolve', 'An import that leads nowhere.', {}, { couldNotResolve: true }),
    forbid(
      'declared-packages',
      'A package that package.json does not name.',
      {},
      { dependencyTypes: ['npm-no-pkg', 'npm-unknown'] },
    ),
    forbid(
      'no-build-tools-at-work',
      'What runs in the harbour office does not need the build tools.',
      { path: '^(shared|server|simulator)/' },
      {
        dependencyTypes: ['npm-dev'],
        dependencyTypesNot: ['type-only'],
        pathNot: '(^|/)node_modules/@types/',
      },
    ),
    forbid(
      'tests-stay-outside',
      'The program does not know its tests.',
      { path: '^(shared|server|simulator|src)/' },
      { path: '^tests/' },
    ),

    // shared: pure, the floor of the house
    forbid(
      'shared-stands-alone',
      'shared imports nothing of the house but itself.',
      { path: '^shared/' },
      {
        path: '^(server|simulator|src|tests)/',
      },
    ),
    forbid(
      'shared-has-no-node',
      'shared runs in the browser too.',
      { path: '^shared/' },
      { dependencyTypes: ['core'] },
    ),
    forbid(
      'shared-packages',
      'Only calculation and shapes.',
      { path: '^shared/' },
      {
        path: anyNpm,
        pathNot: npm('zod', 'fft\\.js', 'mathjs', 'luxon', '@types/luxon', 'geographiclib-geodesic'),
      },
    ),
    forbid(
      'schemas-need-zod-alone',
      'Schemas and messages load in every page.',
      { path: '^shared/(schemas|wire)/' },
      {
        path: anyNpm,
        pathNot: npm('zod'),
      },
    ),

    // the three above never meet
    forbid(
      'simulator-knows-shared-only',
      'The simulator is a stranger to the server, as a real station is.',
      { path: '^simulator/' },
      {
        path: '^(server|src)/',
      },
    ),
    forbid(
      'simulator-packages',
      'A station needs a socket and calculation.',
      { path: '^simulator/' },
      {
        path: anyNpm,
        pathNot: npm('ws', '@types/ws', '@types/node', 'fft\\.js', 'zod'),
      },
    ),
    forbid(
      'server-apart',
      'Server and client meet in the schemas of shared.',
      { path: '^server/' },
      { path: '^(src|simulator)/' },
    ),
    forbid(
      'client-apart',
      'Server and client meet in the schemas of shared.',
      { path: '^src/' },
      { path: '^(server|simulator)/' },
    ),
    forbid('client-has-no-node', 'The client runs in a browser.', { path: '^src/' }, { dependencyTypes: ['core'] }),
    forbid(
      'client-packages',
      'Packages of the server stay there.',
      { path: '^src/' },
      {
        path: npm(
          'express',
          'sequelize',
          'mariadb',
          'umzug',
          'ws',
          'pino',
          'nodemailer',
          'jsonwebtoken',
          'bcryptjs',
          'piscina',
          'node-cron',
        ),
      },
    ),

    // server
    forbid(
      'doors-do-not-touch-tables',
      'A door makes one service call.',
      { path: '^server/(routes|sockets|commands|jobs)/' },
      {
        path: '^server/models/',
      },
    ),
    forbid(
      'doors-apart',
      'Routes, sockets, commands and jobs never call each other.',
      { path: '^server/(routes|sockets|commands|jobs)/' },
      {
        path: '^server/(routes|sockets|commands|jobs)/',
        pathNot: '^server/$1/',
      },
    ),
    forbid(
      'doors-send-no-mail',
      'Only jobs deliver mail.',
      { path: '^server/(routes|sockets|services)/' },
      { path: '^server/mail/' },
    ),
    forbid(
      'services-know-no-door',
      'What happens does not depend on who asked.',
      { path: '^server/services/' },
      {
        path: [upperServer, '^server/workers/'],
      },
    ),
    forbid(
      'presenters-ask-services',
      'What is shown is the same at every door.',
      { path: '^server/presenters/' },
      {
        path: ['^server/models/', '^server/workers/', upperServer, ...npm('express', 'ws', 'sequelize')],
      },
    ),
    forbid(
      'services-packages',
      'Services know no http, no sockets, no mail.',
      { path: '^server/services/' },
      {
        path: npm(
          'express',
          'ws',
          'nodemailer',
          'smtp-server',
          'supertest',
          '@types/express',
          '@types/ws',
          '@types/nodemailer',
        ),
      },
    ),
    ...serviceRules,
    forbid(
      'mail-and-workers-know-shared',
      'They get what they need as arguments.',
      { path: '^server/(mail|workers)/' },
      {
        path: ['^server/(models|services)/', upperServer],
      },
    ),
    forbid(
      'models-are-the-ground',
      'Tables know nothing above them.',
      { path: '^server/models/' },
      {
        path: ['^server/(services|mail|workers)/', upperServer],
      },
    ),
    forbid(
      'models-packages',
      'Tables need sequelize.',
      { path: '^server/models/' },
      {
        path: anyNpm,
        pathNot: npm('sequelize', 'zod', 'mariadb', '@types/node', '@types/validator'),
      },
    ),
    forbid(
      'bootstrap-needs-no-package',
      'These files run before npm has installed anything.',
      { path: '^server/setup/.+\\.mjs$' },
      {
        dependencyTypesNot: ['core'],
        pathNot: '^server/setup/.+\\.mjs$',
        // What is imported when it is reached may lean on packages.
        dynamic: false,
      },
    ),
    forbid(
      'http-at-its-doors',
      'express stays with routes, middleware and the app.',
      {
        path: '^server/',
        pathNot: '^server/(app\\.ts|routes|middleware)',
      },
      { path: npm('express', '@types/express') },
    ),
    forbid(
      'sockets-at-their-doors',
      'ws stays with the sockets.',
      { path: '^server/', pathNot: '^server/(sockets|index\\.ts)' },
      {
        path: npm('ws', '@types/ws'),
      },
    ),

    // client
    forbid(
      'pages-ask-stores',
      'A page shows what a store holds.',
      { path: '^src/(pages|layouts|components)/' },
      { path: '^src/api/' },
    ),
    forbid(
      'components-know-no-page',
      'A component can stand on any page.',
      { path: '^src/(layouts|components)/' },
      { path: '^src/pages/' },
    ),
    forbid(
      'drawings-are-pure',
      'Props in, SVG out.',
      { path: '^src/components/drawings/' },
      {
        path: [
          '^src/(stores|api|router|pages|layouts|boot|composables)/',
          '^src/components/(?!drawings/)',
          ...npm('vue-router', 'pinia', 'quasar'),
        ],
      },
    ),
    forbid(
      'stores-know-no-page',
      'A store does not know who shows it.',
      { path: '^src/(stores|composables|api)/' },
      {
        path: '^src/(components|pages|layouts)/',
      },
    ),
    forbid(
      'api-is-the-ground',
      'The api asks and hears; stores decide.',
      { path: '^src/api/' },
      {
        path: '^src/(stores|composables|router|boot)/',
      },
    ),
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    exclude: { path: '^(dist|var|coverage)/' },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'tsconfig.json' },
    enhancedResolveOptions: { exportsFields: ['exports'], conditionNames: ['import', 'types', 'node', 'default'] },
  },
}
