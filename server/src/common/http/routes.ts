import type { Application } from 'express';

interface Layer {
  readonly route?: { readonly path: string; readonly methods: Record<string, boolean> };
  match(path: string): boolean;
}

/** Nest registers middleware as routes of every method, and each handler as a route of one. */
const isHandler = ({ route }: Layer): boolean => route !== undefined && Object.keys(route.methods).length === 1;

const layersOf = (app: Application): Layer[] => (app as unknown as { router: { stack: Layer[] } }).router.stack;

/** Methods that the router answers at `path`, in capitals; empty when nothing lives there. */
export function allowedMethods(app: Application, path: string): string[] {
  if (!path.startsWith('/api/')) return [];
  const methods = layersOf(app)
    .filter((layer) => isHandler(layer) && layer.match(path))
    .flatMap((layer) => Object.keys(layer.route!.methods).map((method) => method.toUpperCase()));
  return [...new Set(methods.flatMap((method) => (method === 'GET' ? ['GET', 'HEAD'] : [method])))].sort();
}
