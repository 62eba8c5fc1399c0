import type { JSX } from 'preact';
import { ComparePage } from '../compare/ComparePage.tsx';
import { MeasurePage } from '../measure/MeasurePage.tsx';
import { PlanPage } from '../plan/PlanPage.tsx';
import { ReportPage } from '../report/ReportPage.tsx';
import { ResonancePage } from '../resonance/ResonancePage.tsx';
import { ResponseCard } from '../response/ResponseCard.tsx';
import { RunSheet } from '../run-sheet/RunSheet.tsx';
import { bench, connected } from '../state/bench.ts';
import { type PageName, page } from '../state/view.ts';
import { DropZone } from './DropZone.tsx';
import { DialogHost } from './dialogs.tsx';
import { Header } from './Header.tsx';
import { Notices } from './Notices.tsx';
import { Start } from './Start.tsx';

const PAGES: Readonly<Record<PageName, () => JSX.Element>> = {
  plan: () => <PlanPage />,
  measure: () => <MeasurePage />,
  resonance: () => <ResonancePage />,
  compare: () => <ComparePage />,
  report: () => <ReportPage />,
};

/** The whole window. */
export function App() {
  const state = bench.value;
  if (!state) return <p class="unseen">Opening the bench …</p>;
  return (
    <div class="bench">
      <Header />
      {state.test ? <Work /> : <Start />}
      <DialogHost />
      <DropZone />
      <Notices />
      {!connected.value && (
        <div class="dropping" role="alert">
          Dwellbook does not answer. Everything up to now is saved; start it again.
        </div>
      )}
    </div>
  );
}

function Work() {
  return (
    <>
      {page.value !== 'report' && (
        <aside class="side" aria-label="Run sheet and response">
          <RunSheet />
          <ResponseCard />
        </aside>
      )}
      <main class={`page-${page.value}`}>{PAGES[page.value]()}</main>
    </>
  );
}
