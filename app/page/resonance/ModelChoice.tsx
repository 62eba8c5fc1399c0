import { EXCITATIONS, type Excitation } from '../../../src/testfile/schema.ts';
import { edit } from '../state/bench.ts';
import { configuration } from '../state/view.ts';

const WORDS: Record<Excitation, string> = {
  force: 'force on the moving part',
  'spring-end': 'spring end moved',
  base: 'base moved, motion against the room',
  'base-relative': 'base moved, motion against the base',
  unbalance: 'rotating unbalance',
};

/** Which model is fitted. */
export function ModelChoice() {
  const sheet = configuration.value;
  if (!sheet) return null;
  return (
    <div class="model">
      <label>
        Excitation
        <select
          value={sheet.excitation}
          onChange={(event) =>
            void edit({
              kind: 'change-configuration',
              id: sheet.id,
              changes: { excitation: event.currentTarget.value as Excitation },
            })
          }
        >
          {EXCITATIONS.map((each) => (
            <option key={each} value={each}>
              {WORDS[each]}
            </option>
          ))}
        </select>
      </label>
      <label>
        Damping
        <select
          value={sheet.damping ?? 'viscous'}
          onChange={(event) =>
            void edit({
              kind: 'change-configuration',
              id: sheet.id,
              changes: { damping: event.currentTarget.value as 'viscous' | 'structural' },
            })
          }
        >
          <option value="viscous">viscous</option>
          <option value="structural">structural</option>
        </select>
      </label>
    </div>
  );
}
