import type { MouseEvent, ReactNode } from 'react';
import { pathOfRoute, type Route } from './route.ts';
import { goTo } from './useRoute.ts';

interface LinkProps {
  readonly to: Route;
  readonly className?: string;
  readonly current?: boolean;
  readonly children: ReactNode;
}

/** A real link: it can be opened in another window, and goes without a reload otherwise. */
export function Link({ to, className, current, children }: LinkProps) {
  const follow = (event: MouseEvent<HTMLAnchorElement>) => {
    if (event.button !== 0 || event.metaKey || event.ctrlKey || event.shiftKey || event.altKey) return;
    event.preventDefault();
    goTo(to);
  };
  return (
    <a href={pathOfRoute(to)} className={className} aria-current={current ? 'page' : undefined} onClick={follow}>
      {children}
    </a>
  );
}
