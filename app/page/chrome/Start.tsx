import { ask, bench } from '../state/bench.ts';
import { runCommand } from './commands.ts';

/** The empty bench: what to do, and the tests of before. */
export function Start() {
  const recent = bench.value?.recent ?? [];
  return (
    <main class="start">
      <div class="sheet">
        <h1>A logbook for sine-dwell tests</h1>
        <p class="lead">
          Film each dwell with a phone on a tripod, a steel rule in view. Dwellbook reads amplitude and lag
          from the clips, each with its uncertainty, and fits the resonance.
        </p>
        <div class="drop">
          <p>Drop a folder of clips here to start a test, or a test file to open it.</p>
          <div class="actions">
            <button type="button" class="go" onClick={() => runCommand('open-demo')}>
              Open the demo test
            </button>
            <button type="button" onClick={() => runCommand('add-folder')}>
              Choose a folder of clips …
            </button>
            <button type="button" onClick={() => runCommand('open-test')}>
              Open a test …
            </button>
            <button type="button" onClick={() => runCommand('new-test')}>
              New test
            </button>
          </div>
        </div>
        <ol>
          <li>
            <b>Clips in</b>One clip a dwell. Name them after the drive frequency, such as 1.62Hz.mp4, and the
            run sheet fills itself.
          </li>
          <li>
            <b>Three clicks, one length</b>Two points on the rule and the distance between them, and the part
            that moves.
          </li>
          <li>
            <b>The resonance</b>Every clip measures itself; natural frequency, damping ratio and Q appear as
            the rows fill.
          </li>
        </ol>
        {recent.length > 0 && (
          <section aria-labelledby="recent-tests">
            <h2 id="recent-tests">Recent tests</h2>
            <ul class="recent">
              {recent.map(({ path, title }) => (
                <li key={path}>
                  <button type="button" onClick={() => void ask('openTest', { path })}>
                    <span>{title}</span>
                    <span class="faint path">{path}</span>
                  </button>
                  <button
                    type="button"
                    class="plain"
                    aria-label={`Forget ${title}`}
                    onClick={() => void ask('forgetRecent', { path })}
                  >
                    Forget
                  </button>
                </li>
              ))}
            </ul>
          </section>
        )}
      </div>
    </main>
  );
}
