import type { Estimate } from '../../../shared/estimate.ts';
import { Button } from '../../components/ui/button.tsx';
import { decimalsFor, fixed } from '../../lib/format.ts';
import type { DraftControls } from './contract.ts';
import { isSettingName } from './draft-settings.ts';
import { jumpToSetting } from './jump.ts';

const QUESTIONS: Record<string, string> = {
  averagingScale: 'On which scale were the sweeps averaged?',
  rbwHz: 'With which RBW was the trace taken?',
  rbwKind: 'What does the stated RBW mean?',
  sweeps: 'How many sweeps were averaged?',
};

const CHOICES: Record<string, readonly { value: string; label: string }[]> = {
  averagingScale: [
    { value: 'power', label: 'Power' },
    { value: 'log', label: 'Log' },
    { value: 'voltage', label: 'Voltage' },
  ],
  rbwKind: [
    { value: '3dB', label: '−3 dB' },
    { value: '6dB', label: '−6 dB' },
    { value: 'noise', label: 'Noise bandwidth' },
  ],
};

const startsWith = (text: string, word: string) => text.toLowerCase().startsWith(word.toLowerCase());

/** What stands in the way of one density: each missing setting as a question, with answers to click where there are few. */
export function MissingQuestion({
  estimate,
  draft,
  readOnly,
}: {
  estimate: Estimate;
  draft: DraftControls;
  readOnly: boolean;
}) {
  if (estimate.missingSettings.length === 0 || estimate.density !== null) return null;
  return (
    <div
      role="region"
      aria-label="Waiting for you"
      className="mt-4 border-t-2 border-warn-g bg-warnw px-4 py-3"
    >
      {estimate.missingSettings.map((name) => (
        <Question key={name} name={name} estimate={estimate} draft={draft} readOnly={readOnly} />
      ))}
    </div>
  );
}

function Question({
  name,
  estimate,
  draft,
  readOnly,
}: {
  name: string;
  estimate: Estimate;
  draft: DraftControls;
  readOnly: boolean;
}) {
  const choices = CHOICES[name] ?? [];
  const alternatives = name === 'averagingScale' ? estimate.alternatives : [];
  return (
    <div className="grid gap-2 py-1">
      <p className="text-verdict text-ink">
        {QUESTIONS[name] ?? `The setting ${name} is missing.`}{' '}
        <span className="text-body text-ink2">
          The file doesn’t say it, and without it there is no single density.
        </span>
      </p>
      {!readOnly && (
        <div className="flex flex-wrap items-stretch gap-2.5">
          {choices.map(({ value, label }) => {
            const found = alternatives.find((alternative) => startsWith(alternative.label, value));
            return (
              <Button
                key={value}
                className="h-auto! min-h-10 py-1.5"
                onClick={() => draft.setSettings({ [name]: value })}
              >
                {label}
                {found === undefined && alternatives.length > 0 && (
                  <span className="text-caption font-normal text-ink2">doesn’t fit the scatter</span>
                )}
                {found !== undefined && (
                  <span className="text-caption font-normal text-ink2">
                    gives{' '}
                    <span className="font-mono">
                      {fixed(found.dbmPerHz, decimalsFor((found.highDbmPerHz - found.lowDbmPerHz) / 2))}
                    </span>{' '}
                    dBm/Hz
                  </span>
                )}
              </Button>
            );
          })}
          {choices.length === 0 && isSettingName(name) && (
            <Button onClick={() => jumpToSetting(name)}>Enter it in §5</Button>
          )}
        </div>
      )}
      {alternatives.length > 0 && name === 'averagingScale' && !readOnly && (
        <p className="text-table text-ink2">{estimate.averagingCheck.sentence}</p>
      )}
    </div>
  );
}
