import type { Server } from 'node:http';
import type { RequestHandler } from 'express';

export interface DevClient {
  middleware: RequestHandler;
  close(): Promise<void>;
}

/** The bundler's own server behind ours, on one port: pages change as their source does. */
export async function createDevClient(projectRoot: string, server: Server): Promise<DevClient> {
  const vite = await import('vite');
  const bundler = await vite.createServer({
    root: projectRoot,
    appType: 'spa',
    server: { middlewareMode: true, hmr: { server } },
  });
  return { middleware: bundler.middlewares, close: () => bundler.close() };
}
