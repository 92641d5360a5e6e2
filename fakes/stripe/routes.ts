import type { FormTree } from './form';
import type { World } from './world';

export type Call = {
  world: World;
  /** The `:id` of the path; empty when the path has none. */
  id: string;
  /** Query or body, without `expand`. */
  input: FormTree;
};

/** One operation of the API. `run` answers the object to show or throws a Refusal. */
export type Route = {
  method: 'GET' | 'POST' | 'DELETE';
  path: string;
  run: (call: Call) => object;
};

/** The route for a method and path, with the id it names. */
export function findRoute(routes: Route[], method: string, path: string): { route: Route; id: string } | null {
  const steps = path.split('/');
  for (const route of routes) {
    const pattern = route.path.split('/');
    if (route.method !== method || pattern.length !== steps.length) continue;
    if (!pattern.every((part, index) => part === ':id' || part === steps[index])) continue;
    const place = pattern.indexOf(':id');
    return { route, id: place < 0 ? '' : decodeURIComponent(steps[place] ?? '') };
  }
  return null;
}
