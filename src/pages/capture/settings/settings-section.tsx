import { Button } from '../../../components/ui/button.tsx';
import { Section } from '../../../components/ui/section.tsx';
import type { SectionProps } from '../contract.ts';
import { ChoiceField } from './choice-field.tsx';
import { DETECTORS, FILTER_SHAPES, RBW_KINDS, SCALES } from './fields.ts';
import { TypedField } from './typed-field.tsx';
import { useSettingsForm } from './use-settings-form.ts';

/** The capture's settings, each with where it came from; a change is computed at once and kept when asked for. */
export function SettingsSection(props: SectionProps) {
  const settings = useSettingsForm(props);
  const field = { settings };
  const averages = settings.held('detector').value === 'average';
  return (
    <Section number={5} title="Settings" aside="each with where it came from">
      <form
        className="@container"
        noValidate
        onSubmit={(event) => event.preventDefault()}
        aria-label="Settings of the capture"
      >
        <div className="grid items-start gap-x-9 @min-[640px]:grid-cols-2">
          <div>
            <TypedField {...field} name="rbwHz" label="RBW" words="RBW" wanted />
            <ChoiceField {...field} name="rbwKind" label="RBW kind" options={RBW_KINDS} look="segments" />
            <ChoiceField
              {...field}
              name="filterShape"
              label="Filter shape"
              options={FILTER_SHAPES}
              look="listbox"
            />
            <TypedField
              {...field}
              name="bandwidthRatio"
              uncertainty="bandwidthRatioUncertainty"
              label={<Two first="Bandwidth ratio" second="noise to RBW" />}
              words="Noise bandwidth over RBW"
            />
            <TypedField {...field} name="vbwHz" label="VBW" words="VBW" />
            <ChoiceField {...field} name="detector" label="Detector" options={DETECTORS} look="listbox" />
            {averages && (
              <ChoiceField
                {...field}
                name="detectorScale"
                label="It averages"
                options={SCALES}
                look="segments"
              />
            )}
            <TypedField {...field} name="impedanceOhm" label="Impedance" words="Impedance" />
          </div>
          <div>
            <ChoiceField
              {...field}
              name="averagingScale"
              label="Averaging"
              options={SCALES}
              look="segments"
            />
            <TypedField {...field} name="sweeps" label="Sweeps" words="Sweeps" wanted />
            <TypedField {...field} name="sweepTimeS" label="Sweep time" words="Sweep time" />
            <TypedField {...field} name="attenuationDb" label="Attenuation" words="Attenuation" />
            <TypedField
              {...field}
              name="externalGainDb"
              uncertainty="externalGainUncertaintyDb"
              label="External gain"
              words="External gain"
            />
            <TypedField
              {...field}
              name="levelUncertaintyDb"
              label={<Two first="Level scale" second="standard u" />}
              words="Level, standard uncertainty"
              wanted
            />
            <TypedField
              {...field}
              name="ownNoiseDbmPerHz"
              uncertainty="ownNoiseUncertaintyDb"
              label={<Two first="Own noise" second="dBm/Hz" />}
              words="Own noise"
            />
            <TypedField {...field} name="sourceTemperatureK" label="Source at" words="Source temperature" />
          </div>
        </div>
      </form>
      <SettingsFoot {...props} />
    </Section>
  );
}

function Two({ first, second }: { first: string; second: string }) {
  return (
    <>
      {first}
      <span className="block text-caption text-ink3">{second}</span>
    </>
  );
}

function SettingsFoot({ capture, draft, readOnly }: SectionProps) {
  const latest = capture.estimates[0]?.number ?? 0;
  if (readOnly) {
    return (
      <p className="pt-2.5 text-caption text-ink2">
        {capture.may.estimate
          ? 'These are the settings of an estimate that is kept; it stays as it is.'
          : 'You may look at this capture, but not change it.'}
      </p>
    );
  }
  return (
    <div className="flex min-h-10 flex-wrap items-center gap-x-3 gap-y-2 pt-2.5 print:hidden">
      <p className="mr-auto text-caption text-ink2">
        {draft.changed
          ? `Estimate ${latest + 1} isn’t kept yet; estimate ${latest} stays as it is.`
          : `A change makes estimate ${latest + 1}; estimate ${latest} stays as it is.`}
      </p>
      {(draft.canUndo || draft.canRedo) && (
        <>
          <Button kind="quiet" shortcut="u" disabled={!draft.canUndo} onClick={draft.undo}>
            Undo
          </Button>
          <Button kind="quiet" shortcut="U" disabled={!draft.canRedo} onClick={draft.redo}>
            Redo
          </Button>
        </>
      )}
      {draft.changed && <Button onClick={draft.reset}>Throw the change away</Button>}
    </div>
  );
}
