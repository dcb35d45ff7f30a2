import { describe, expect, it } from 'vitest';
import { contracts } from '../../shared/contracts';
import { openApi } from '../../server/http/api-docs';
import '../../server/app';
import { Router } from 'express';
import { doors } from '../../server/http/serve';
import { mountRoutes } from '../../server/routes';

describe('contracts', () => {
  it('have unique ids, and unique method and path', () => {
    expect(contracts.length).toBeGreaterThan(60);
    expect(new Set(contracts.map((endpoint) => endpoint.id)).size).toBe(contracts.length);
    expect(new Set(contracts.map((endpoint) => `${endpoint.method} ${endpoint.path}`)).size).toBe(
      contracts.length,
    );
  });

  it.each(contracts.map((endpoint) => [endpoint.id, endpoint] as const))(
    '%s says what goes in',
    (_id, endpoint) => {
      expect(endpoint.summary.length).toBeGreaterThan(10);
      const named = [...endpoint.path.matchAll(/:([A-Za-z]+)/g)].map((match) => match[1] as string);
      const schema = endpoint.params as { shape?: Record<string, unknown> } | undefined;
      expect(Object.keys(schema?.shape ?? {}).sort()).toEqual(named.sort());
      if (endpoint.method === 'GET') expect(endpoint.body).toBeUndefined();
      if (endpoint.body)
        expect(endpoint.body.safeParse({ surely_not_a_field: 1 }).success, 'unknown keys are refused').toBe(
          false,
        );
    },
  );

  it('every contract is mounted as a door, once, and every door is a contract', () => {
    doors.length = 0;
    mountRoutes(Router());
    expect(doors.map((door) => door.endpoint.id).sort()).toEqual(
      contracts.map((endpoint) => endpoint.id).sort(),
    );
  });

  it('openapi.json describes every operation', () => {
    const paths = openApi().paths as Record<string, Record<string, { operationId: string }>>;
    const ids = Object.values(paths).flatMap((methods) =>
      Object.values(methods).map((operation) => operation.operationId),
    );
    expect(ids.sort()).toEqual(contracts.map((endpoint) => endpoint.id).sort());
  });
});
