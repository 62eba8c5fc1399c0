import { MeasurePage } from '../measure/MeasurePage.tsx';
import { ResonancePage } from '../resonance/ResonancePage.tsx';
import { ResponseCard } from '../response/ResponseCard.tsx';
import { RunSheet } from '../run-sheet/RunSheet.tsx';
import { bench, connected } from '../state/bench.ts';
import { page } from '../state/view.ts';
import { DropZone } from './DropZone.tsx';
import { DialogHost } from './dialogs.tsx';
import { Header } from './Header.tsx';
import { Notices } from './Notices.tsx';
import { Start } from './Start.tsx';

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
      <aside class="side" aria-label="Run sheet and response">
        <RunSheet />
        <ResponseCard />
      </aside>
      <main>{page.value === 'resonance' ? <ResonancePage /> : <MeasurePage />}</main>
    </>
  );
}
