import { useState } from 'react';
import type { Capture } from '../../../shared/capture.ts';
import { useChangeCapture } from '../../api/captures.ts';
import { Button, LinkButton } from '../../components/ui/button.tsx';

const MOST = 200;

/** The capture's name, which can be changed in place. */
export function CaptureName({ capture }: { capture: Capture }) {
  const [open, setOpen] = useState(false);
  if (open) return <NameForm capture={capture} onDone={() => setOpen(false)} />;
  return (
    <>
      {capture.name}
      {capture.may.edit && (
        <LinkButton
          aria-label={`Rename ${capture.name}`}
          className="ml-3 align-middle text-caption font-normal tracking-normal print:hidden"
          onClick={() => setOpen(true)}
        >
          Rename
        </LinkButton>
      )}
    </>
  );
}

function NameForm({ capture, onDone }: { capture: Capture; onDone: () => void }) {
  const [name, setName] = useState(capture.name);
  const change = useChangeCapture(capture.id);
  const given = name.trim();
  const save = () => {
    if (given === '' || change.isPending) return;
    if (given === capture.name) onDone();
    else change.mutate({ name: given }, { onSuccess: onDone });
  };
  const error =
    given === ''
      ? 'A capture needs a name; Esc keeps the old one.'
      : change.error === null
        ? null
        : `The name wasn’t changed: ${change.error.message}`;
  return (
    <form
      className="flex flex-wrap items-center gap-2"
      onSubmit={(event) => {
        event.preventDefault();
        save();
      }}
      onKeyDown={(event) => {
        if (event.key !== 'Escape') return;
        event.preventDefault();
        onDone();
      }}
    >
      <input
        className="field max-w-[560px] min-w-0 flex-1 basis-[240px] font-normal tracking-normal"
        aria-label="Name of the capture"
        aria-invalid={error === null ? undefined : true}
        aria-describedby="rename-error"
        value={name}
        maxLength={MOST}
        autoFocus
        onFocus={(event) => event.target.select()}
        onChange={(event) => setName(event.target.value)}
      />
      <Button type="submit" disabled={change.isPending} className="tracking-normal">
        Save
      </Button>
      <Button kind="quiet" onClick={onDone} className="tracking-normal">
        Cancel
      </Button>
      <span
        id="rename-error"
        role="alert"
        className="basis-full text-table font-normal tracking-normal text-bad"
      >
        {error}
      </span>
    </form>
  );
}
