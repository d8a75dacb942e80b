import type { Capture } from '../../../shared/capture.ts';
import type { Estimate } from '../../../shared/estimate.ts';
import { Button } from '../../components/ui/button.tsx';
import { Menu } from '../../components/ui/menu.tsx';
import { download } from '../../lib/csv.ts';
import { ledgerTsv } from './ledger-tsv.ts';

/** Takes the estimate away: whole as JSON, its trace as CSV, its ledger for a spreadsheet. */
export function ExportMenu({ capture, estimate }: { capture: Capture; estimate: Estimate | null }) {
  const name = `${capture.number}-${estimate?.number ?? 'unsaved'}`;
  const id = estimate?.id ?? null;
  return (
    <Menu
      trigger={<Button disabled={estimate === null}>Export</Button>}
      items={[
        {
          label: 'Estimate as JSON',
          note: 'every input, the ledger, the budget, the findings',
          onSelect: () =>
            download(`${name}.json`, `${JSON.stringify(estimate, null, 2)}\n`, 'application/json'),
        },
        {
          label: 'Cleaned trace as CSV',
          note: id === null ? 'keep the estimate first' : 'each point, and whether it counts',
          disabled: id === null,
          onSelect: () => window.location.assign(`/api/estimates/${id}/trace.csv`),
        },
        {
          label: 'Ledger as TSV',
          note: 'pastes into a spreadsheet',
          disabled: estimate === null || estimate.ledger.length === 0,
          onSelect: () => {
            if (estimate === null) return;
            download(`${name}-ledger.tsv`, ledgerTsv(estimate), 'text/tab-separated-values;charset=utf-8');
          },
        },
      ]}
    />
  );
}
