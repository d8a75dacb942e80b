import type { AveragingCheck, Hypothesis } from '../../shared/estimate.ts';
import { fixed, significant } from '../../shared/quantities.ts';

/** What the sentences on an averaging check speak of. */
export interface AveragingWords {
  verdict: AveragingCheck['verdict'];
  /** False where too few independent points are left for a verdict. */
  enough: boolean;
  likelihoods: Hypothesis[];
  stated: Hypothesis | null;
  best: Hypothesis | null;
  seenAverages: number | null;
  what: string;
  nothingAveraged: boolean;
  residuals: { scatterDb: number; independentPoints: number };
}

const NAMES: Record<Hypothesis['id'], string> = {
  power: 'power',
  log: 'log',
  voltage: 'voltage',
  none: 'no',
  otherCount: 'other',
};

const decimals = (scatterDb: number) => (scatterDb < 0.3 ? 3 : 2);
const scatter = (db: number) => `${fixed(db, decimals(db))} dB`;

const averagingOf = ({ id }: Hypothesis, what: string) =>
  id === 'none' ? 'no averaging at all' : `${NAMES[id]} averaging of ${what}`;

/** Some words for a table cell: `fits log, 20`, `power stated, fits log`. */
export function summaryOf(words: AveragingWords): string {
  const { verdict, stated, best, nothingAveraged } = words;
  if (nothingAveraged && verdict === 'declared') return 'fits one sweep';
  const count = stated && stated.sweeps > 1 ? `, ${significant(stated.sweeps, 4)}` : '';
  switch (verdict) {
    case 'declared':
      return stated ? `fits ${NAMES[stated.id]}${count}` : 'fits';
    case 'other':
      if (!stated || !best) return 'differs';
      if (best.id === 'otherCount')
        return `${significant(stated.sweeps, 4)} stated, fits ${significant(best.sweeps, 3)}`;
      return `${NAMES[stated.id]} stated, fits ${best.id === 'none' ? 'none' : NAMES[best.id]}`;
    case 'none':
      return 'fits no averaging';
    case 'undetermined':
      return stated ? 'can’t tell' : 'scale not stated';
  }
}

/** The verdict as a sentence with its numbers. */
export function sentenceOn(words: AveragingWords): string {
  const { verdict, stated, best, what, nothingAveraged, seenAverages, residuals, likelihoods } = words;
  const seen = `The scatter, ${scatter(residuals.scatterDb)},`;
  if (!words.enough) {
    return `Too few points stand for themselves (${significant(residuals.independentPoints, 2)}) to tell how they were averaged.`;
  }
  const rivals = likelihoods.filter(({ id }) => id !== best?.id && id !== 'none');
  const wouldGive = rivals
    .filter(({ id }) => id === (best?.id === 'log' ? 'power' : 'log'))
    .map((rival) => `; ${NAMES[rival.id]} averaging would give ${scatter(rival.predictedScatterDb)}`)
    .join('');
  switch (verdict) {
    case 'declared':
      if (nothingAveraged) return `${seen} is that of a single sweep without averaging.`;
      return stated ? `${seen} fits ${averagingOf(stated, what)}${wouldGive}.` : `${seen} fits.`;
    case 'other': {
      if (!stated || !best) return `${seen} differs from what is declared.`;
      const error = best.levelErrorDb;
      const consequence =
        Math.abs(error) < 0.005
          ? ' The level isn’t affected.'
          : ` Evaluated as declared, the density reads ${fixed(Math.abs(error), 2)} dB too ${error < 0 ? 'low' : 'high'}.`;
      const fits =
        best.id === 'otherCount'
          ? `is that of ${significant(best.sweeps, 3)} averages`
          : `fits ${averagingOf(best, what)}`;
      return `${seen} ${fits}; ${averagingOf(stated, what)}, as declared, would give ${scatter(stated.predictedScatterDb)}.${consequence}`;
    }
    case 'none': {
      const predictions = likelihoods
        .filter(({ id }) => id !== 'none')
        .map((hypothesis) => `${NAMES[hypothesis.id]} ${scatter(hypothesis.predictedScatterDb)}`)
        .join(', ');
      const count =
        seenAverages === null ? '' : ` It is what ${significant(seenAverages, 2)} averages would show.`;
      return `${seen} fits no averaging of ${what}: ${predictions}.${count}`;
    }
    case 'undetermined': {
      const fitting = likelihoods.filter(({ fits, id }) => fits && id !== 'none');
      const list = fitting
        .map((hypothesis) => `${NAMES[hypothesis.id]} (${scatter(hypothesis.predictedScatterDb)})`)
        .join(' and ');
      if (stated)
        return `${seen} fits more than one scale: ${list}. With these points they can’t be told apart.`;
      return fitting.length === 0
        ? `${seen} fits no scale, and none is stated.`
        : `The averaging scale isn’t stated. ${seen} fits ${list}${wouldGive}.`;
    }
  }
}

/** What to do about the verdict, on the bench or in the settings. */
export function adviceOn(words: AveragingWords): string {
  const { verdict, stated, best } = words;
  if (!words.enough) return 'Use a wider span or more points.';
  switch (verdict) {
    case 'declared':
      return 'Nothing to do.';
    case 'other':
      if (best?.id === 'none')
        return 'Check that the average had finished before the trace was saved, and repeat.';
      if (best?.id === 'otherCount')
        return 'Check the number of sweeps, the video filter and the detector that the trace was taken with.';
      return `Check the analyser’s averaging type; if it was ${best ? NAMES[best.id] : 'another'}, correct the setting, else repeat with the ${stated ? NAMES[stated.id] : 'power'} scale.`;
    case 'none':
      return 'Leave out whatever isn’t steady noise, or check sweeps, VBW and detector; then repeat the capture.';
    case 'undetermined':
      return stated
        ? 'Use more points or more sweeps to tell the scales apart.'
        : 'Say on which scale the averaging worked.';
  }
}
