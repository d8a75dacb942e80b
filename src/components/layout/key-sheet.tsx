import { setKeysEnabled, useKeys, useKeysEnabled } from '../../lib/keys.ts';
import { Button } from '../ui/button.tsx';
import { Dialog, DialogActions } from '../ui/dialog.tsx';
import { Kbd } from '../ui/kbd.tsx';
import { closeKeySheet, openKeySheet, useKeySheetState, type KeyRow } from './key-sheet-state.ts';

const EVERYWHERE: readonly KeyRow[] = [
  { keys: ['?'], words: 'this sheet' },
  { keys: ['Esc'], words: 'close, cancel' },
];

/** The sheet of keys, opened by `?`. */
export function KeySheet() {
  const { open, screen } = useKeySheetState();
  const enabled = useKeysEnabled();
  useKeys({ '?': openKeySheet });
  return (
    <Dialog open={open} onOpenChange={(next) => (next ? openKeySheet() : closeKeySheet())} title="Keys">
      {screen !== null && <Rows title={screen.title} rows={screen.rows} />}
      <Rows title="Everywhere" rows={EVERYWHERE} />
      <label className="mt-4 flex min-h-8 items-center gap-2.5 border-t border-rule2 pt-3 text-table">
        <input
          type="checkbox"
          className="check"
          checked={enabled}
          onChange={(event) => setKeysEnabled(event.target.checked)}
        />
        Single-letter keys act (never inside a field)
      </label>
      <DialogActions>
        <Button onClick={closeKeySheet}>Close</Button>
      </DialogActions>
    </Dialog>
  );
}

function Rows({ title, rows }: { title: string; rows: readonly KeyRow[] }) {
  return (
    <section className="mt-3">
      <h3 className="border-b border-rule pb-1 text-caption text-ink3">{title}</h3>
      <dl className="grid grid-cols-[110px_1fr]">
        {rows.map(({ keys, words }) => (
          <div
            key={words}
            className="col-span-2 grid grid-cols-subgrid border-b border-rule2 py-1.5 text-table"
          >
            <dt className="flex items-center gap-1.5">
              {keys.map((key) => (
                <span key={key}>
                  <Kbd>{key}</Kbd>
                  <span className="sr-only">{key}</span>
                </span>
              ))}
            </dt>
            <dd>{words}</dd>
          </div>
        ))}
      </dl>
    </section>
  );
}
