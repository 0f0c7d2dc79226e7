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
      names.flatMap((name) => {
        const others = floors
          .slice(floor)
          .flat()
          .filter((other) => other !== name);
        // Nothing lies above the top floor, and an empty pattern would match everything.
        if (others.length === 0) return [];
        return {
          name: `${name}-stays-on-its-floor`,
          comment: 'A room imports only from floors below it.',
          severity: 'error',
          from: { path: room(name) },
          to: { path: others.map(room).join('|') },
        };
      }),
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
