import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { clientUploadRoutes } from '@/server/client-uploads';
import { uploadRoutes } from '@/server/uploads';

const pagesFolder = path.resolve('src/pages');
/** Pages that also take a plain form post. */
const formPost = /request\.method === 'POST'/i;

function patternOf(file: string): string {
  const bare = file.replace(/\.(astro|ts)$/, '').replace(/(^|\/)index$/, '');
  return `/${bare}`.replace(/\/$/, '') || '/';
}

function methodsOf(file: string): string[] {
  const source = readFileSync(path.join(pagesFolder, file), 'utf8');
  if (file.endsWith('.astro')) return formPost.test(source) ? ['GET', 'POST'] : ['GET'];
  return [...source.matchAll(/export const (GET|POST|PUT|PATCH|DELETE)\b/g)].map((found) => found[1] as string);
}

/** Routes of the Express layer, in the form of Astro's patterns. */
function expressRoutes(): string[] {
  const found = [...uploadRoutes().stack, ...clientUploadRoutes().stack].flatMap(({ route }) => {
    if (!route) return [];
    const pattern = route.path.replace(/:(\w+)/g, '[$1]');
    return route.stack.map((layer) => `${layer.method.toUpperCase()} ${pattern}`);
  });
  return [...new Set(found)];
}

/** Every method and address of the application, made from its files. */
export function allRoutes(): string[] {
  const files = readdirSync(pagesFolder, { recursive: true, encoding: 'utf8' }).filter((file) =>
    /\.(astro|ts)$/.test(file),
  );
  const astro = files.flatMap((file) => methodsOf(file).map((method) => `${method} ${patternOf(file)}`));
  return [...astro, ...expressRoutes()].sort();
}
