import { useSyncExternalStore } from 'react';
import { pathOfRoute, type Route, routeOfPath } from './route.ts';

const listeners = new Set<() => void>();

/** Asked before leaving a place with unsaved work; returns false to stay. */
let mayLeave: () => boolean = () => true;

/** While a place holds unsaved work it sets a question; the returned function takes it away again. */
export function guardLeaving(question: () => boolean): () => void {
  mayLeave = question;
  return () => {
    if (mayLeave === question) mayLeave = () => true;
  };
}

/** Goes to a place, as a link would. */
export function goTo(route: Route): void {
  if (!mayLeave()) return;
  window.history.pushState(null, '', pathOfRoute(route));
  window.scrollTo(0, 0);
  for (const listener of listeners) listener();
}

function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  window.addEventListener('popstate', listener);
  return () => {
    listeners.delete(listener);
    window.removeEventListener('popstate', listener);
  };
}

/** The place the address shows now. */
export function useRoute(): Route {
  return routeOfPath(useSyncExternalStore(subscribe, () => window.location.pathname));
}
