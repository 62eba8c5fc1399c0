import { effect } from '@preact/signals';
import { render } from 'preact';
import { App } from './chrome/App.tsx';
import { applyLooks } from './chrome/looks.ts';
import { bench, preferences, startMirror } from './state/bench.ts';
import './styles/tokens.css';
import './styles/base.css';
import './styles/frame.css';
import './styles/run-sheet.css';
import './styles/measure.css';
import './styles/resonance.css';

effect(() => applyLooks(preferences.value));
effect(() => {
  const { test, save } = bench.value ?? {};
  document.title = test ? `${save?.status === 'saved' ? '' : '• '}${test.title} – Dwellbook` : 'Dwellbook';
});
startMirror();
const place = document.getElementById('bench');
if (place) render(<App />, place);
