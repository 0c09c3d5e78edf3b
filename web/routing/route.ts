/** The places of the page, each with its own address, so that a link can be kept or sent. */
export type Route =
  | { readonly place: 'tests' }
  | { readonly place: 'new-test' }
  | { readonly place: 'sheet'; readonly testId: string }
  | { readonly place: 'import' }
  | { readonly place: 'photo-help' }
  | { readonly place: 'unknown'; readonly path: string };

/** Reads the place from an address path. A testId is whatever stands after /tests/, decoded. */
export function routeOfPath(path: string): Route {
  const parts = path.split('/').filter((part) => part !== '');
  const [first, second, ...rest] = parts;
  if (first === undefined) return { place: 'tests' };
  if (rest.length === 0 && first === 'tests') {
    if (second === undefined) return { place: 'tests' };
    if (second === 'new') return { place: 'new-test' };
    return { place: 'sheet', testId: decoded(second) };
  }
  if (second === undefined && first === 'import') return { place: 'import' };
  if (first === 'help' && second === 'photo' && rest.length === 0) return { place: 'photo-help' };
  return { place: 'unknown', path };
}

/** Address of a place; the inverse of `routeOfPath`. */
export function pathOfRoute(route: Route): string {
  switch (route.place) {
    case 'tests':
      return '/';
    case 'new-test':
      return '/tests/new';
    case 'sheet':
      return `/tests/${encodeURIComponent(route.testId)}`;
    case 'import':
      return '/import';
    case 'photo-help':
      return '/help/photo';
    case 'unknown':
      return route.path;
  }
}

function decoded(part: string): string {
  try {
    return decodeURIComponent(part);
  } catch {
    return part;
  }
}
