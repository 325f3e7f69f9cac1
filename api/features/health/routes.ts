import type { Router } from 'express';

export interface HealthDeps {
  /** Each rejects while the thing it asks cannot serve. */
  readonly checks: Readonly<Record<string, () => Promise<unknown>>>;
}

/** `/healthz`: the process answers. `/readyz`: what it needs answers too. */
export function registerHealth(router: Router, deps: HealthDeps): void {
  router.get('/healthz', (_req, res) => {
    res.json({ status: 'alive' });
  });
  router.get('/readyz', (_req, res, next) => {
    const entries = Object.entries(deps.checks).map(async ([name, check]) => {
      const fine = await check().then(
        () => true,
        () => false,
      );
      return [name, fine ? 'ready' : 'not ready'] as const;
    });
    Promise.all(entries)
      .then((results) => {
        const ready = results.every(([, state]) => state === 'ready');
        res.status(ready ? 200 : 503).json({ status: ready ? 'ready' : 'not ready', ...Object.fromEntries(results) });
      })
      .catch(next);
  });
}
