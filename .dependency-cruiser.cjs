// A room imports only from floors below it, and from itself. Rooms on one floor do not know each other.
const floors = [
  ['fault', 'quantities', 'version'],
  ['numeric', 'fixed', 'file'],
  ['source', 'weather'],
  ['table', 'tracker'],
  ['vectors', 'trial'],
  ['score', 'check'],
  ['bench', 'report'],
  ['schemas'],
  ['index'],
  ['cli'],
];

const room = (name) => `^src/${name}(/|\\.ts$)`;

module.exports = {
  forbidden: [
    ...floors.flatMap((names, floor) =>
      names.map((name) => ({
        name: `${name}-stays-on-its-floor`,
        comment: 'A room imports only from floors below it.',
        severity: 'error',
        from: { path: room(name) },
        to: {
          path: floors
            .slice(floor)
            .flat()
            .filter((other) => other !== name)
            .map(room)
            .join('|'),
        },
      })),
    ),
    {
      name: 'no-unknown-room',
      comment: 'Every folder of src is on a floor: add new ones to the list above.',
      severity: 'error',
      from: {},
      to: { path: '^src/', pathNot: floors.flat().map(room).join('|') },
    },
    { name: 'no-cycles', severity: 'error', from: {}, to: { circular: true } },
  ],
  options: {
    tsConfig: { fileName: 'tsconfig.json' },
    tsPreCompilationDeps: true,
    doNotFollow: { path: 'node_modules' },
  },
};
