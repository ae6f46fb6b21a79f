/** The layers of DEVELOPERS.md: src → shared ← server, server/links → firmware-sim → shared. */
const only = (name, from, allowed) => ({
  name,
  severity: 'error',
  from: { path: `^${from}/` },
  to: {
    path: '^(src|server|shared|firmware-sim|tests|drizzle)/',
    pathNot: allowed.map((folder) => `^${folder}/`),
  },
});

module.exports = {
  forbidden: [
    only('shared imports nothing of ours', 'shared', ['shared']),
    only('the page knows only shared', 'src', ['src', 'shared']),
    only('the simulated board knows only shared', 'firmware-sim', ['firmware-sim', 'shared']),
    only('the server knows shared and, in links, the simulated board', 'server', [
      'server',
      'shared',
      'firmware-sim',
    ]),
    {
      name: 'only links know the simulated board',
      severity: 'error',
      from: { path: '^server/', pathNot: '^server/links/' },
      to: { path: '^firmware-sim/' },
    },
    {
      name: 'the control loop knows ArmLink only',
      comment: 'arm-process.ts is where a link is chosen; everything else in control is free of I/O.',
      severity: 'error',
      from: { path: '^server/control/', pathNot: '^server/control/arm-process\\.ts$' },
      to: { path: '^(server/(?!control/)|firmware-sim/)' },
    },
    {
      name: 'shared and control have no I/O',
      severity: 'error',
      from: { path: '^(shared|server/control)/', pathNot: '^server/control/arm-process\\.ts$' },
      to: { dependencyTypes: ['core'] },
    },
    {
      name: 'the arm process opens no database and no port',
      severity: 'error',
      from: { path: '^server/(control|links)/' },
      to: { path: '^server/(db|routes|live|auth|arms|mail|audit)/' },
    },
    {
      name: 'features do not import each other',
      severity: 'error',
      from: { path: '^src/features/([^/]+)/' },
      to: { path: '^src/features/', pathNot: '^src/features/$1/' },
    },
    {
      name: 'components, scene, live and api know no feature',
      severity: 'error',
      from: { path: '^src/(components|scene|live|api)/' },
      to: { path: '^src/(features|routes)/' },
    },
    { name: 'no circles', severity: 'error', from: {}, to: { circular: true } },
    {
      name: 'nothing unresolved',
      severity: 'error',
      from: {},
      to: { couldNotResolve: true, pathNot: '\\.css$' },
    },
  ],
  options: {
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'tsconfig.json' },
    doNotFollow: { path: 'node_modules' },
    exclude: { path: '^(dist|node_modules)/' },
    enhancedResolveOptions: {
      extensions: ['.ts', '.tsx', '.js', '.mjs', '.json', '.css'],
      exportsFields: ['exports'],
      conditionNames: ['import', 'require', 'node', 'default', 'types'],
    },
  },
};
