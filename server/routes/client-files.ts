import { join } from 'node:path';
import express, { Router } from 'express';
import { notFound } from '../services/problems.ts';

/** The built client: hashed assets for a year, and the page for every address that isn't the API's. */
export function clientFiles(folder: string): Router {
  const router = Router();
  router.use(
    '/assets',
    express.static(join(folder, 'assets'), { immutable: true, maxAge: '1y', index: false }),
  );
  router.use('/assets', () => {
    throw notFound('There is no such file; reload the page.');
  });
  router.use(express.static(folder, { index: false, maxAge: 0 }));
  router.get('/{*path}', (request, response, next) => {
    if (request.path.startsWith('/api/') || request.path === '/api') return next();
    response.sendFile('index.html', {
      root: folder,
      cacheControl: false,
      headers: { 'Cache-Control': 'no-cache' },
    });
  });
  return router;
}
