import { fileURLToPath } from 'node:url';

const source = (name) => fileURLToPath(new URL(`../server/${name}`, import.meta.url));

/** Server entries beside Astro's own, in the one bundle, so that models and services exist once. */
const entries = new Map([
  [source('main.ts'), 'main.mjs'],
  [source('cli.ts'), 'cli.mjs'],
  [source('workers/read-file.ts'), 'read-file.worker.mjs'],
  [source('workers/draw-charts.ts'), 'draw-charts.worker.mjs'],
  [source('workers/calculate.ts'), 'calculate.worker.mjs'],
]);

/** Paths that belong to the development server itself and never reach the application. */
const developmentPath = /^\/(@|node_modules\/|src\/|_image|__)/;

/**
 * Joins the Express application and Astro: in development the application runs before Astro's own handler; in the
 * build its entry and the children's become further inputs of Astro's server bundle.
 *
 * @returns {import('astro').AstroIntegration}
 */
export function expressLayer() {
  return {
    name: 'express-layer',
    hooks: {
      'astro:server:setup': ({ server }) => {
        server.middlewares.use(async (req, res, next) => {
          if (developmentPath.test(req.url ?? '')) return next();
          try {
            const { getApp } = await server.ssrLoadModule('/src/server/app.ts');
            const app = await getApp();
            app(req, res, (error) => {
              if (error) return next(error);
              req[Symbol.for('astro.locals')] = res.locals.astro;
              next();
            });
          } catch (error) {
            next(error);
          }
        });
      },
      'astro:build:setup': ({ vite, target }) => {
        if (target !== 'server') return;
        const rollup = ((vite.build ??= {}).rollupOptions ??= {});
        if (!Array.isArray(rollup.input)) throw new Error('express-layer: Astro no longer gives its inputs as a list');
        rollup.input = [...rollup.input, ...entries.keys()];
        const astroNames = rollup.output?.entryFileNames;
        rollup.output = {
          ...rollup.output,
          entryFileNames: (chunk) =>
            entries.get(chunk.facadeModuleId ?? '') ??
            (typeof astroNames === 'function' ? astroNames(chunk) : (astroNames ?? 'entry.mjs')),
        };
      },
    },
  };
}
