import path from 'node:path';
import { cruise, type IRuleSetType } from 'dependency-cruiser';
import { describe, expect, it } from 'vitest';

const features = [
  'accounts',
  'events',
  'talks',
  'programme',
  'finance',
  'registration',
  'grants',
  'messages',
  'runup',
  'site',
];

/** The import law of DEVELOPERS.md, one rule per sentence. */
const forbidden: NonNullable<IRuleSetType['forbidden']> = [
  {
    name: 'shared-is-pure',
    severity: 'error',
    from: { path: '^shared' },
    to: { pathNot: ['^shared', 'node_modules/(zod|luxon)/'] },
  },
  {
    name: 'luxon-only-in-time',
    severity: 'error',
    from: { path: '^shared', pathNot: '^shared/lib/time' },
    to: { path: 'node_modules/luxon' },
  },
  {
    name: 'client-not-server',
    severity: 'error',
    from: { path: '^src' },
    to: { path: '^(server|seeds|tests)' },
  },
  { name: 'server-not-client', severity: 'error', from: { path: '^server' }, to: { path: '^(src|tests)' } },
  {
    name: 'infrastructure-knows-no-feature',
    severity: 'error',
    from: {
      path: '^(shared/lib|shared/http|src/lib|src/components|server/(db|http|jobs|mail|documents))',
      pathNot: ['server/jobs/(registry|periodic)', 'server/db/models', 'server/http/api-docs'],
    },
    to: { path: '/features/' },
  },
  {
    name: 'server-features-meet-in-services',
    severity: 'error',
    from: { path: '^server/features/([^/]+)/' },
    to: {
      path: '^server/features/',
      pathNot: ['^server/features/$1/', '\\.service\\.ts$', '\\.jobs\\.ts$'],
      dependencyTypesNot: ['type-only'],
    },
  },
  {
    name: 'client-features-meet-in-queries',
    severity: 'error',
    from: { path: '^src/features/([^/]+)/' },
    to: { path: '^src/features/', pathNot: ['^src/features/$1/', '\\.queries\\.ts$'] },
  },
  {
    name: 'routes-do-not-touch-models',
    severity: 'error',
    from: { path: '\\.routes\\.ts$' },
    to: { path: '\\.model\\.ts$' },
  },
  {
    name: 'policies-are-pure',
    severity: 'error',
    from: { path: '\\.policy\\.ts$' },
    to: { path: '(\\.model|\\.service)\\.ts$' },
  },
  {
    name: 'nothing-below-imports-app',
    severity: 'error',
    from: { path: '^src/(features|components|lib)' },
    to: { path: '^src/app' },
  },
  {
    name: 'no-circles',
    severity: 'error',
    from: {},
    to: { circular: true, viaOnly: { dependencyTypesNot: ['type-only'] } },
  },
  ...features.flatMap((feature, index) => {
    const higher = features.slice(index + 1);
    if (higher.length === 0) return [];
    return [
      {
        name: `${feature}-below-${higher[0]}`,
        severity: 'error' as const,
        from: { path: `^(server|shared)/features/${feature}/` },
        to: { path: `^(server|shared)/features/(${higher.join('|')})/` },
      },
    ];
  }),
];

describe('import law', () => {
  it('holds in every file that was read', async () => {
    const result = await cruise(
      ['shared', 'server', 'src'],
      {
        ruleSet: { forbidden },
        validate: true,
        tsPreCompilationDeps: true,
        doNotFollow: { path: 'node_modules' },
        exclude: { path: 'node_modules/(?!zod|luxon)' },
        enhancedResolveOptions: { extensions: ['.ts', '.tsx', '.js', '.json'] },
      },
      {
        alias: {
          '@shared': path.resolve('shared'),
          '@server': path.resolve('server'),
          '@': path.resolve('src'),
        },
      },
    );
    if (typeof result.output === 'string') throw new Error('no result');
    const { modules, summary } = result.output;
    expect(modules.filter((module) => module.source.startsWith('server/')).length).toBeGreaterThan(60);
    expect(modules.filter((module) => module.source.startsWith('src/')).length).toBeGreaterThan(40);
    const edges = modules.flatMap((module) => module.dependencies.map((dependency) => dependency.resolved));
    expect(
      edges.some((resolved) => resolved === 'shared/http/problem.ts'),
      'aliases are resolved',
    ).toBe(true);
    const broken = summary.violations.map(
      (violation) => `${violation.rule.name}: ${violation.from} -> ${violation.to}`,
    );
    expect(broken).toEqual([]);
  }, 120_000);
});
