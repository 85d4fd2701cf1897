/**
 * The table of allowed imports (DEVELOPERS.md, "Which way things may point"). A row names a room and
 * the rooms it may take from; whatever is not in its row is refused.
 */
const table = {
  'engine/numbers': [],
  'engine/spans': [],
  'engine/study': ['engine/spans', 'engine/numbers'],
  'engine/text': ['engine/spans', 'engine/numbers'],
  'engine/model': ['engine/numbers'],
  'engine/themes': [
    'engine/model',
    'engine/text',
    'engine/study',
    'engine/spans',
    'engine/numbers',
  ],
  'engine/evidence': [
    'engine/model',
    'engine/text',
    'engine/study',
    'engine/spans',
    'engine/numbers',
  ],
  main: ['engine', 'resources'],
  // The wire is pure, and has an end on either side.
  renderer: ['engine', 'main/api.ts', 'main/link/wire.ts'],
};

const packagesOf = { 'engine/text': ['natural', 'stopword'] };

const rows = Object.entries(table).flatMap(([room, allowed]) => [
  {
    name: `${room} takes only from its row`,
    severity: 'error',
    from: { path: `^${room}/` },
    to: {
      path: '^(engine|main|renderer|test|resources)/',
      pathNot: [room, ...allowed].map((other) =>
        other.endsWith('.ts') ? `^${other}$` : `^${other}/`,
      ),
    },
  },
  ...(room.startsWith('engine/')
    ? [
        {
          name: `${room} takes only its packages`,
          severity: 'error',
          from: { path: `^${room}/` },
          to: {
            dependencyTypes: ['npm', 'npm-dev', 'core', 'npm-no-pkg', 'unknown'],
            pathNot: (packagesOf[room] ?? []).map((name) => `node_modules/(@types/)?${name}/`),
          },
        },
      ]
    : []),
]);

module.exports = {
  forbidden: [
    ...rows,
    { name: 'no circles', severity: 'error', from: {}, to: { circular: true } },
    {
      name: 'nothing ships from test',
      severity: 'error',
      from: { path: '^(engine|main|renderer)/' },
      to: { path: '^test/' },
    },
  ],
  options: {
    tsPreCompilationDeps: true,
    doNotFollow: { path: 'node_modules' },
    exclude: { path: '\\.as\\.ts$' },
    tsConfig: { fileName: 'tsconfig.base.json' },
    enhancedResolveOptions: { extensions: ['.ts', '.js', '.mjs', '.svelte', '.json'] },
  },
};
