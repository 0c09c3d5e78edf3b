import { PhotoHelpPage } from './help/PhotoHelpPage.tsx';
import { TestListPage } from './list/TestListPage.tsx';
import { ImportPage } from './log/ImportPage.tsx';
import { Link } from './routing/Link.tsx';
import type { Route } from './routing/route.ts';
import { useRoute } from './routing/useRoute.ts';
import { NewTestPage } from './sheet/NewTestPage.tsx';
import { SheetPage } from './sheet/SheetPage.tsx';
import { COMMON } from './texts/common.ts';
import { UnitChoice } from './units/UnitChoice.tsx';

const PLACES = [
  [{ place: 'tests' }, COMMON.tests],
  [{ place: 'new-test' }, COMMON.newTest],
  [{ place: 'import' }, COMMON.importLog],
  [{ place: 'photo-help' }, COMMON.photoHelp],
] as const satisfies readonly (readonly [Route, string])[];

/** The frame of the page: name, places, units, and the place the address names. */
export function App() {
  const route = useRoute();
  return (
    <>
      <a className="skip" href="#content">
        {COMMON.skipToContent}
      </a>
      <header className="page-header">
        <Link to={{ place: 'tests' }} className="name">
          <img src="/mark.svg" alt="" width="28" height="28" />
          {COMMON.program}
        </Link>
        <nav aria-label={COMMON.program}>
          {PLACES.map(([to, title]) => (
            <Link key={to.place} to={to} current={to.place === route.place}>
              {title}
            </Link>
          ))}
        </nav>
        <UnitChoice />
      </header>
      <main id="content" tabIndex={-1}>
        <Place route={route} />
      </main>
    </>
  );
}

function Place({ route }: { readonly route: Route }) {
  switch (route.place) {
    case 'tests':
      return <TestListPage />;
    case 'new-test':
      return <NewTestPage />;
    case 'sheet':
      return <SheetPage key={route.testId} testId={route.testId} />;
    case 'import':
      return <ImportPage />;
    case 'photo-help':
      return <PhotoHelpPage />;
    case 'unknown':
      return (
        <div className="narrow">
          <h1>{COMMON.noSuchPlace}</h1>
          <Link to={{ place: 'tests' }}>{COMMON.tests}</Link>
        </div>
      );
  }
}
