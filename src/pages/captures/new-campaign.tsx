import { useState, type FormEvent } from 'react';
import type { Campaign } from '../../../shared/capture.ts';
import { useCreateCampaign } from '../../api/campaigns.ts';
import { Button } from '../../components/ui/button.tsx';
import { Dialog, DialogActions } from '../../components/ui/dialog.tsx';
import { Field, TextInput } from '../../components/ui/field.tsx';

interface Props {
  labId: string;
  /** What happens with the new campaign; null: the dialog is closed. */
  onMade: ((campaign: Campaign) => void) | null;
  onClose: () => void;
}

/** Levels are typed with a true minus or a hyphen, and with a decimal point or comma. */
function limitOf(text: string): number | null | undefined {
  const plain = text.trim().replace('−', '-').replace(',', '.');
  if (plain === '') return null;
  const value = Number(plain);
  return Number.isFinite(value) && value >= -300 && value <= 100 ? value : undefined;
}

/** Asks for a campaign's name and, where there is one, its limit. */
export function NewCampaignDialog({ labId, onMade, onClose }: Props) {
  const create = useCreateCampaign(labId);
  const [limitError, setLimitError] = useState<string>();
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    const limitDbmPerHz = limitOf(String(form.get('limit') ?? ''));
    setLimitError(
      limitDbmPerHz === undefined
        ? 'Write a number in dBm/Hz, such as −145.5, or leave it empty.'
        : undefined,
    );
    if (limitDbmPerHz === undefined) return;
    const name = String(form.get('name') ?? '').trim();
    create.mutate(
      { name, limitDbmPerHz },
      {
        onSuccess: (campaign) => {
          onMade?.(campaign);
          onClose();
        },
      },
    );
  };
  return (
    <Dialog
      open={onMade !== null}
      onOpenChange={onClose}
      title="New campaign"
      description="A set of captures for one purpose, such as a lot or a survey."
    >
      <form onSubmit={submit} className="grid gap-3">
        <Field label="Name" layout="stack" error={create.error?.message}>
          {(ids) => <TextInput {...ids} name="name" required maxLength={200} autoFocus />}
        </Field>
        <Field label="Limit of the density, if there is one" layout="stack" error={limitError}>
          {(ids) => (
            <TextInput {...ids} name="limit" inputMode="text" unit="dBm/Hz" mono className="pr-16!" />
          )}
        </Field>
        <DialogActions>
          <Button kind="quiet" onClick={onClose}>
            Cancel
          </Button>
          <Button kind="primary" type="submit" disabled={create.isPending}>
            {create.isPending ? 'Making it…' : 'Make it'}
          </Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}
