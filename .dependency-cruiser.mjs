// The house's import rules (DEVELOPERS.md). `house` is the one table; eslint.config.js reads it too.

export const house = {
  /** Features from low to high. A feature imports the face (index.ts) of a lower level: never sideways or up. */
  levels: [
    ['history', 'laboratory', 'mail', 'outgoing-mail', 'health', 'validation'],
    ['users', 'session', 'second-factor'],
    ['clients', 'programmes', 'methods', 'materials', 'instruments'],
    ['samples', 'calibrations', 'bench'],
    ['batches'],
    ['results', 'review'],
    ['alerts', 'certificates', 'charts', 'studies', 'actions', 'quality'],
    ['today', 'portal'],
  ],
  /** Where the features live. */
  homes: ['api/src/modules', 'web/src/features'],
  /** What each layer may import of the project, beside its own files. */
  layers: [
    { layer: 'shared/src/assay', mayImport: [] },
    { layer: 'shared/src', mayImport: [] },
    { layer: 'api/src/platform', mayImport: ['shared/src'] },
    { layer: 'api/src/modules', mayImport: ['api/src/platform', 'shared/src'] },
    { layer: 'web/src/lib', mayImport: ['shared/src'] },
    { layer: 'web/src/ui', mayImport: ['web/src/lib', 'shared/src'] },
    { layer: 'web/src/features', mayImport: ['web/src/ui', 'web/src/lib', 'shared/src'] },
    { layer: 'web/src/pages', mayImport: ['web/src/features', 'web/src/ui', 'web/src/lib', 'shared/src'] },
    {
      layer: 'e2e',
      // beside what an outside program knows: every address, and who may open it
      mayImport: ['shared/src/contracts', 'shared/src/paths[.]ts', 'shared/src/permissions', 'fixtures'],
    },
  ],
  /** Packages that are one place's business. */
  only: [
    {
      packages: ['kysely'],
      where: ['api/src/[^.]+[.]repository[.]ts$', 'api/src/platform/database/'],
    },
    { packages: ['pg', 'pg-boss', 'nodemailer', 'pdfmake', 'exceljs'], where: ['api/src/platform/'] },
    { packages: ['fs', 'fs/promises'], where: ['api/src/platform/'] },
    { packages: ['axios'], where: ['web/src/lib/'] },
  ],
  /** The only places that may ask what time it is now; everywhere else the time is handed in. */
  clocks: ['api/src/platform/**', 'web/src/lib/**'],
  /** Code that tests, measures or drives the product from outside may cut corners that the product may not. */
  outside: [
    '[.]spec[.]tsx?$',
    '[.]test-support[.]tsx?$',
    '^(api|web)/src/testing/',
    '^api/src/bench/',
    '^(shared|api)/bench/',
  ],
}

const any = (patterns) => `^(${patterns.join('|')})`
const project = '^(shared|api|web|e2e|sql|fixtures)/'

const layerRules = house.layers.map(({ layer, mayImport }) => ({
  name: `layer-${layer.replaceAll('/', '-')}`,
  comment: `${layer} imports ${mayImport.join(', ') || 'nothing'} of the project.`,
  severity: 'error',
  // The browser tests are tests, and keep this rule all the same: they see the product from outside.
  from: { path: `^${layer}/`, ...(layer === 'e2e' ? {} : { pathNot: house.outside }) },
  to: { path: project, pathNot: [any([layer, ...mayImport]), '(^|/)node_modules/'] },
}))

const levelRules = house.homes.flatMap((home) =>
  house.levels.map((level, index) => ({
    name: `level-${index + 1}-${home.split('/')[0]}`,
    comment: `${level.join(', ')}: of features, only those of a lower level may be imported.`,
    severity: 'error',
    from: { path: `^${home}/(${level.join('|')})/`, pathNot: house.outside },
    to: { path: `^${home}/(${house.levels.slice(index).flat().join('|')})/`, pathNot: `^${home}/$1/` },
  })),
)

const faceRules = house.homes.map((home) => ({
  name: `face-${home.split('/')[0]}`,
  comment: 'A feature shows others its index.ts alone.',
  severity: 'error',
  from: { path: `^${home}/([^/]+)/`, pathNot: house.outside },
  to: { path: `^${home}/[^/]+/`, pathNot: [`^${home}/$1/`, `^${home}/[^/]+/index\\.tsx?$`] },
}))

const unlistedRules = house.homes.map((home) => ({
  name: `unlisted-${home.split('/')[0]}`,
  comment: 'Every feature has its level in the table of .dependency-cruiser.mjs.',
  severity: 'error',
  from: {},
  to: { path: `^${home}/`, pathNot: [`^${home}/(${house.levels.flat().join('|')})/`] },
}))

const onlyRules = house.only.map(({ packages, where }) => {
  const workspace = where.every((place) => place.startsWith('web')) ? 'web' : 'api'
  return {
    name: `only-${packages[0].replaceAll(/\W+/g, '-')}`,
    comment: `${packages.join(', ')}: only in ${where.join(', ')}.`,
    severity: 'error',
    from: {
      path: `^(${workspace}|shared)/src/`,
      pathNot: [...house.outside, ...where.map((place) => `^${place}`)],
    },
    to: {
      path: packages.flatMap((name) => [
        `node_modules/${name}/`,
        `node_modules/@types/${name}/`,
        `^${name}$`,
        `^node:${name}$`,
      ]),
    },
  }
})

/** @type {import('dependency-cruiser').IConfiguration} */
export default {
  forbidden: [
    ...layerRules,
    ...levelRules,
    ...faceRules,
    ...unlistedRules,
    ...onlyRules,
    {
      name: 'pages-use-faces',
      comment: 'A page composes features through their index.ts.',
      severity: 'error',
      from: { path: '^web/src/(pages|app)/', pathNot: house.outside },
      to: { path: '^web/src/features/[^/]+/', pathNot: '^web/src/features/[^/]+/index\\.tsx?$' },
    },
    {
      name: 'pages-keep-apart',
      comment: 'What two areas share is a feature or a part of the kit.',
      severity: 'error',
      from: { path: '^web/src/pages/([^/]+)/', pathNot: house.outside },
      to: { path: '^web/src/pages/[^/]+/', pathNot: '^web/src/pages/$1/' },
    },
    {
      name: 'tests-stay-outside',
      comment: 'The product never imports what exists for tests.',
      severity: 'error',
      from: { path: '^(shared|api|web)/src/', pathNot: house.outside },
      to: { path: house.outside },
    },
    {
      name: 'no-cycle',
      comment: 'Two files that need each other are one file, or want a third.',
      severity: 'error',
      from: { pathNot: house.outside },
      to: { circular: true },
    },
    {
      name: 'no-unresolvable',
      severity: 'error',
      from: {},
      // A package of types alone (@types/pdfmake) is the compiler's to find.
      to: { couldNotResolve: true, pathNot: ['^pdfmake/interfaces[.]js$'] },
    },
    {
      name: 'declared-packages',
      comment: "A package that runs in production stands in its workspace's dependencies.",
      severity: 'error',
      from: { path: '^(shared|api|web)/src/', pathNot: house.outside },
      to: { dependencyTypes: ['npm-dev', 'npm-no-pkg', 'npm-unknown'], dependencyTypesNot: ['type-only'] },
    },
  ],
  options: {
    doNotFollow: { path: ['node_modules'] },
    exclude: { path: ['^(shared|api|web|e2e)/(dist|test-results|pictures|coverage)/'] },
    tsPreCompilationDeps: true,
    combinedDependencies: false,
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['source', 'import', 'module', 'browser', 'node', 'default'],
      extensions: ['.ts', '.tsx', '.mts', '.js', '.mjs', '.cjs', '.json', '.css'],
      mainFields: ['module', 'main'],
    },
  },
}
