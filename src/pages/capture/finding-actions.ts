import type { SettingName } from '../../../shared/settings.ts';

/** What can be done about a finding: settle a setting at once, go to its field, or go to a section. */
export interface FindingAction {
  words: string;
  set?: Readonly<Record<string, string | number>>;
  field?: SettingName;
  section?: number;
}

const field = (name: SettingName, words: string): FindingAction => ({ words, field: name });

const AVERAGING: readonly FindingAction[] = [
  { words: 'See the averaging check', section: 3 },
  field('averagingScale', 'Change it in §5'),
];
const OWN_NOISE: readonly FindingAction[] = [field('ownNoiseDbmPerHz', 'Enter the own noise in §5')];
const SPURS: readonly FindingAction[] = [{ words: 'See the spurs', section: 4 }];

/** Actions by the code of the finding; codes without any have none. */
export const FINDING_ACTIONS: Readonly<Record<string, readonly FindingAction[]>> = {
  'no-points': [{ words: 'See the trace', section: 1 }],
  'rbw-not-stated': [field('rbwHz', 'Enter the RBW in §5')],
  'scale-not-stated': [AVERAGING[0], field('averagingScale', 'Say it in §5')],
  'scale-from-scatter': AVERAGING,
  'sweeps-not-stated': [field('sweeps', 'Enter the sweeps in §5')],
  'averaging-differs': AVERAGING,
  'averaging-fits-none': AVERAGING,
  'averaging-undetermined': [{ words: 'See the averaging check', section: 3 }],
  'peak-detector': [field('detector', 'Change it in §5')],
  'vbw-below-rbw': [field('vbwHz', 'Check the VBW in §5')],
  'sweep-too-fast': [field('sweepTimeS', 'Check the sweep time in §5')],
  'rbw-kind-not-stated': [
    { words: 'Confirm −3 dB', set: { rbwKind: '3dB' } },
    field('rbwKind', 'Change it in §5'),
  ],
  'filter-shape-assumed': [
    field('filterShape', 'State the shape in §5'),
    field('bandwidthRatio', 'Enter a measured ratio'),
  ],
  'detector-not-stated': [field('detector', 'Enter it in §5')],
  'level-uncertainty-not-stated': [field('levelUncertaintyDb', 'Enter it in §5')],
  'gain-uncertainty-not-stated': [field('externalGainUncertaintyDb', 'Enter it in §5')],
  'own-noise-too-near': OWN_NOISE,
  'own-noise-near': OWN_NOISE,
  'own-noise-not-stated': OWN_NOISE,
  'spurs-carry-power': SPURS,
  'spur-family': SPURS,
};
