import type { Router } from 'express';
import { openApiDocument } from '../../contract/openapi';
import { ROUTES } from '../../contract/routes';

export function registerOpenApi(router: Router, serverUrl: string): void {
  let document: object | undefined;
  router.get('/openapi.json', (_req, res) => {
    document ??= openApiDocument(ROUTES, serverUrl);
    res.json(document);
  });
}
