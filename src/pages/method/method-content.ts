export type Basis = 'published' | 'computed' | 'common practice' | 'memory';

export interface Source {
  basis: Basis;
  text: string;
}

export interface MethodSection {
  /** Anchor, as ledger lines link to it. */
  id: string;
  title: string;
  /** What the step does, one paragraph each. */
  paragraphs: string[];
  formulas: string[];
  /** Values that anyone can hold against the formula. */
  check?: { head: string[]; rows: string[][] };
  /** Where it ends to hold. */
  limits: string[];
  sources: Source[];
}

const MINUS = '−';

export const METHOD: readonly MethodSection[] = [
  {
    id: 'mean',
    title: 'Mean of the points',
    paragraphs: [
      'Levels in dB are turned into power and averaged there. Points that are left out, around spurs or by a person, don’t count.',
      'Leaving out what stands above a threshold also takes the highest noise points away; the mean is corrected for that truncation.',
    ],
    formulas: ['mean = 10 lg[ (1/M) Σ 10^(Lᵢ/10) ], over the M points used'],
    limits: [
      'The mean of a floor that isn’t level is the average over the band. The estimate says so, with the tilt and its uncertainty.',
    ],
    sources: [
      { basis: 'computed', text: 'from the exponential law of the power of Gaussian noise behind a filter' },
    ],
  },
  {
    id: 'averaging-bias',
    title: 'Averaging bias',
    paragraphs: [
      'Noise that was averaged on the log or the voltage scale reads low. By how much depends on how many values were averaged on that scale: the detector’s, the video filter’s and those of the sweeps.',
      'Adding 2.51 dB to every log-averaged trace is common practice. On the linear mean of 10 log averages that is 0.34 dB too much, on an unaveraged trace the whole 2.51 dB. The value for the finite number is used here.',
    ],
    formulas: [
      'power, any n: 0',
      'log, n values: 10 lg[ Γ(1 + 1/n)^n ]',
      'voltage, n values: 10 lg[ π/4 + (1 − π/4)/n ]',
      'power over k, then log over many: (10/ln 10)·(ψ(k) − ln k)',
      'positive peak of n, one sweep: 10 lg H_n, H_n = 1 + 1/2 + … + 1/n',
    ],
    check: {
      head: ['n', 'log, dB', 'voltage, dB'],
      rows: [
        ['1', '0.0000', '0.0000'],
        ['2', `${MINUS}1.0491`, `${MINUS}0.4929`],
        ['10', `${MINUS}2.1659`, `${MINUS}0.9320`],
        ['100', `${MINUS}2.4713`, `${MINUS}1.0373`],
        ['∞', `${MINUS}2.5068`, `${MINUS}1.0491`],
      ],
    },
    limits: [
      'Where the VBW is near the RBW, the number of values that the video filter averages is good to some hundredths of a dB; the budget carries that.',
      'A peak detector’s bias depends on how many values a point saw. Such an estimate is indicative and never fit for verification.',
    ],
    sources: [
      {
        basis: 'published',
        text: 'Agilent Technologies, Application Note 150, “Spectrum Analysis Basics”, pages 66 and 68: 2.5 dB for log, 1.05 dB for voltage averages, many values',
      },
      {
        basis: 'published',
        text: 'Wunderlich and Sanders, IEEE Trans. Instrum. Meas. 2025, arXiv:2501.11261: the peak’s law',
      },
      { basis: 'computed', text: 'the forms for finite n, from the moments of the exponential law' },
      { basis: 'common practice', text: '+2.51 dB whatever n; not followed' },
    ],
  },
  {
    id: 'noise-bandwidth',
    title: 'Noise bandwidth',
    paragraphs: [
      'The RBW is not the noise bandwidth. It is multiplied by a ratio that follows from the filter’s shape and from what the stated RBW means: width at −3 dB, at −6 dB, or already the noise bandwidth.',
      'A ratio measured on the analyser’s own filter wins over the shape. A trace that is already in dBm/Hz isn’t normalised again.',
    ],
    formulas: ['B_n = r · RBW', 'correction: −10 lg(B_n / 1 Hz)', 'Gaussian, −3 dB: r = √(π / (4 ln 2))'],
    check: {
      head: ['filter', 'r, RBW at −3 dB', 'r, RBW at −6 dB'],
      rows: [
        ['1 pole', '1.5708', '0.9069'],
        ['4 poles, synchronous', '1.1285', '0.7627'],
        ['5 poles, synchronous', '1.1138', '0.7599'],
        ['Gaussian', '1.0645', '0.7527'],
        ['rectangular', '1', '1'],
      ],
    },
    limits: [
      'Taking −6 dB for −3 dB is an error of 1.51 dB with a Gaussian filter. A file that doesn’t say which it means gives a caution.',
      'A shape that is assumed carries an uncertainty into the budget.',
    ],
    sources: [
      {
        basis: 'published',
        text: 'Agilent Technologies, Application Note 150, page 67: 1.05 to 1.13 for filters near the Gaussian',
      },
      {
        basis: 'published',
        text: 'Heinzel, Rüdiger and Schilling, 2002: noise bandwidths of FFT windows',
      },
      {
        basis: 'computed',
        text: 'Gaussian and synchronously tuned poles, from the integral of the response',
      },
    ],
  },
  {
    id: 'own-noise',
    title: 'Analyser’s own noise',
    paragraphs: [
      'The noise that the analyser adds is taken off in linear power, where its density is stated or was measured with the input terminated.',
    ],
    formulas: ['P = P_seen − P_own, in mW/Hz', 'margin 10 dB: −0.46 dB; margin 3 dB: −3.02 dB'],
    limits: [
      'Below a margin of 3 dB no subtraction is made and the estimate says why: what is left would rest on the difference of two nearly equal numbers.',
      'The uncertainty grows as the margin shrinks; the budget carries it.',
    ],
    sources: [{ basis: 'computed', text: 'powers of independent noise add' }],
  },
  {
    id: 'level',
    title: 'Level scale',
    paragraphs: [
      'The absolute level of the analyser enters with the value zero and its stated standard uncertainty. Where none is stated the budget says “not stated”; it isn’t taken as zero.',
    ],
    formulas: ['correction: 0, with u(level)'],
    limits: ['Without a stated level uncertainty, U holds for what is stated alone, and a finding says so.'],
    sources: [{ basis: 'published', text: 'JCGM 100:2008, 4.3: evaluation of type B' }],
  },
  {
    id: 'external-gain',
    title: 'External gain',
    paragraphs: [
      'A gain or loss between the device and the analyser’s input is subtracted, so that the density is the one at the device. A loss is a negative gain.',
    ],
    formulas: ['correction: −G, with u(G)', 'a cable with 0.35 dB loss: G = −0.35 dB, correction +0.35 dB'],
    limits: [
      'Mismatch between device, cable and analyser isn’t in G; it is its own line in the budget when stated.',
    ],
    sources: [{ basis: 'computed', text: 'definition' }],
  },
  {
    id: 'floor',
    title: 'Floor',
    paragraphs: [
      'A running quantile of the power follows the floor, corrected for the distribution of a point. It keeps to tilts and humps and survives many spurs. Then the simplest shape that fits is taken: level, tilt or curve.',
      'A regular ripple is looked for in what is left; it is reported with its period, depth and significance.',
    ],
    formulas: [
      'median of an exponential = ln 2 of its mean, −1.59 dB; for n averages the quantile of the Gamma law',
    ],
    limits: ['A floor that bends within a few RBW can’t be told from a broad spur.'],
    sources: [
      {
        basis: 'published',
        text: 'Recommendation ITU-R SM.1753-2, 10.3: the lowest fifth of the readings carries the noise; the same idea, another quantile',
      },
      { basis: 'computed', text: 'quantiles of the Gamma law' },
    ],
  },
  {
    id: 'spurs',
    title: 'Spurs',
    paragraphs: [
      'A point above the threshold belongs to a spur. The threshold is set so that a clean capture as a whole raises one false spur with the stated probability, 1 % unless said otherwise, counting independent points.',
      'The guard around a spur follows the filter’s shape down to below the floor. Evenly spaced spurs are named as a family.',
      'The corrected level is the signal’s alone. How much noise is in the displayed level depends on the averaging scale: at equal powers a power scale reads 3.01 dB high, a log scale 0.95 dB.',
    ],
    formulas: [
      'threshold from the upper quantile of a point’s law at α / independent points',
      'power scale reads high by 10 lg(1 + N/S), log scale by (10/ln 10)·E₁(S/N)',
    ],
    limits: [
      'A spur that is left out takes the noise under it out as well. Put it back, or leave out more, in the capture; each decision is kept with its reason.',
    ],
    sources: [
      {
        basis: 'published',
        text: 'M. A. Richards, Fundamentals of Radar Signal Processing: thresholds from a floor that is itself estimated',
      },
      { basis: 'computed', text: 'CW near noise, from the Rice law' },
    ],
  },
  {
    id: 'averaging-check',
    title: 'Averaging check',
    paragraphs: [
      'The scatter of the points tells how they were averaged. For the same number of sweeps, log averages scatter up to 1.28 times as much as power averages.',
      'The residuals about the floor are held against what power, log, voltage and no averaging would give. The verdict: fits what is declared; fits another averaging, with the level error that this makes; fits none; or can’t be told, and what is missing.',
    ],
    formulas: ['power over n: (10/ln 10)·√ψ₁(n)', 'log over n: 5.570/√n dB'],
    check: {
      head: ['n', 'power, dB', 'log, dB'],
      rows: [
        ['1', '5.570', '5.570'],
        ['10', '1.408', '1.761'],
        ['20', '0.983', '1.246'],
        ['100', '0.435', '0.557'],
      ],
    },
    limits: [
      'With M independent points the scatter is known to about 1/√(2M) of itself. Some hundred points separate the two; a few dozen don’t.',
      'Where the scale isn’t stated and several fit, the density is given under each of them. None is picked silently.',
    ],
    sources: [
      { basis: 'computed', text: 'moments of the Gamma law and of its logarithm; held against simulation' },
      {
        basis: 'memory',
        text: '5.57 dB for one value on the log scale, Hewlett-Packard Application Note 1303',
      },
    ],
  },
  {
    id: 'interval',
    title: 'Statistical interval',
    paragraphs: [
      'Neighbouring points are correlated, so M points count as fewer. How many is read from the autocorrelation of the points used and bounded by what RBW, point spacing and sweep time allow.',
    ],
    formulas: [
      'M_eff = M/τ',
      'a = M_eff/v, v the relative variance of a point',
      '95 %: m·a/q(0.975; a) … m·a/q(0.025; a), q the quantile of the Gamma law',
    ],
    limits: [
      'It covers chance alone. What is the same for every point, such as the level scale, is in U.',
      'Below 20 effective points v is taken from the chain, not from the data.',
    ],
    sources: [
      {
        basis: 'computed',
        text: 'Gamma law of a mean of powers; coverage is held against simulated captures',
      },
    ],
  },
  {
    id: 'budget',
    title: 'Budget and U',
    paragraphs: [
      'Every part has a distribution, a half width, a standard uncertainty and degrees of freedom. They are combined as a root sum of squares and expanded to 95 %.',
      'The shares beside the ledger are shares of the combined variance. They total 100 %.',
    ],
    formulas: [
      'u² = Σ uᵢ²',
      'ν_eff = u⁴ / Σ(uᵢ⁴/νᵢ)',
      'U = k·u, k = t(0.975; ν_eff)',
      'divisors: rectangular √3, triangular √6, U-shaped √2',
    ],
    limits: ['What isn’t stated isn’t in U. The budget lists it as “not stated”.'],
    sources: [
      {
        basis: 'published',
        text: 'JCGM 100:2008 (GUM), 4, 5 and annex G; example H.1 is recomputed among the tests',
      },
    ],
  },
];

export const CAUTIONS: readonly string[] = [
  'At 0 dB attenuation, or with a preamplifier, the total power and the DC at the analyser’s input must stay below its ratings: not the power in the span, all of it. Use a DC block and a limiter where in doubt.',
  'Powered devices and chains with much gain can exceed the ratings for a moment when they are switched on, switched off or connected. Raise the attenuation before, lower it after.',
  'Follow the instrument’s own limits and the rules of your lab. This tool doesn’t replace the judgement of a licensed laboratory.',
];
