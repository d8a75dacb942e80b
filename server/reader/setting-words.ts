import type { z } from 'zod';
import type { Detector, FilterShape, RbwKind, Scale } from '../../shared/settings.ts';

type DetectorName = z.infer<typeof Detector>;
type ScaleName = z.infer<typeof Scale>;
type KindName = z.infer<typeof RbwKind>;
type ShapeName = z.infer<typeof FilterShape>;

/** Lower case, accents off: `Échantillon` → `echantillon`. */
export function plainWords(text: string): string {
  return text
    .normalize('NFKD')
    .replace(/[\u0300-\u036f]/g, '')
    .replace(/ß/g, 'ss')
    .toLowerCase();
}

/** Letters and digits alone, accents off: `Res. BW` → `resbw`. */
export function bareKey(text: string): string {
  return plainWords(text).replace(/[^a-z0-9]/g, '');
}

const DETECTORS: [DetectorName, string][] = [
  [
    'sample',
    'sample sampled smp smpl samp sa abtast abtastwert stichprobe echantillon echantillonnage muestra muestreo',
  ],
  [
    'average',
    'average avg av ave rms avgrms rmsavg averagerms rmsaverage poweraverage poweravg pwravg averagepower avgpower avgpwr powerrms rmspower mean meanpower mittelwert effektivwert effektiv moyenne moyennerms valeurefficace efficace promedio media valoreficaz eficaz',
  ],
  [
    'peak',
    'peak pk pos positive pospeak pospk positivepeak peakpos pkpos peakpositive ppeak ppk max maxpeak maxpk maximum peakmax maxhold spitze spitzenwert positivespitze crete cretepositive pic pico picopositivo maximo',
  ],
  [
    'negativePeak',
    'neg negative negpeak negpk negativepeak peakneg pkneg npeak npk min minpeak minpk minimum minhold negativespitze cretenegative piconegativo minimo',
  ],
  [
    'autoPeak',
    'auto autopeak autopk apeak apk normal rosenfell alternating alternate alternatingpeak peakalternating posneg peakpeak minmax',
  ],
  ['quasiPeak', 'quasipeak quasi qpeak qp qpk quasispitze quasispitzenwert quasicrete quasipico cuasipico'],
];

const DETECTOR_WORDS = new Map(
  DETECTORS.flatMap(([detector, words]) =>
    words.split(' ').map((word): [string, DetectorName] => [word, detector]),
  ),
);

/** The detector that a text names, or null. */
export function detectorFromText(text: string): DetectorName | null {
  const plain = plainWords(text)
    .replace(/\([^)]*\)/g, ' ')
    .replace(/^\s*[+]\s*(?=p)|(?<=peak|pk)\s*[+]\s*$/g, 'pos')
    .replace(/^\s*-\s*(?=p)|(?<=peak|pk)\s*-\s*$/g, 'neg')
    .replace(/\b(?:detector|detektor|detecteur|det|trace|mode)\b/g, ' ');
  return DETECTOR_WORDS.get(bareKey(plain)) ?? null;
}

const SCALE_WORDS: [ScaleName, string][] = [
  [
    'log',
    'log logarithm logarithmic logarithmisch logarithmique logaritmica logaritmico video vid db dbm logpwr logpower linlog logmag',
  ],
  [
    'power',
    'power pwr pow rms leistung leistungsmittelung puissance potencia watt watts linpwr linpower effektivwert effektiv efficace eficaz quadratic',
  ],
  ['voltage', 'voltage volt volts v spannung tension voltaje linv linvoltage amplitude magnitude'],
];

const SCALE_OF_WORD = new Map(
  SCALE_WORDS.flatMap(([scale, words]) => words.split(' ').map((word): [string, ScaleName] => [word, scale])),
);

const SCALE_FILLERS = new Set(
  'average averaging averages avg ave average type mode scale on sweep sweeps trace of the over mean mittelung mittelwert moyenne moyennage promedio promediado video filter display'.split(
    ' ',
  ),
);

/**
 * The averaging scale that a text names, or null where it names none or two that contradict.
 * `Log-Pwr (Video)` is log, `Power (RMS)` power, `Linear` voltage, `Linear power` power.
 */
export function scaleFromText(text: string): ScaleName | null {
  const words = plainWords(text)
    .split(/[^a-z]+/)
    .filter((word) => word !== '');
  const named = words.map((word) => SCALE_OF_WORD.get(word));
  const unknown = words.filter(
    (word, index) =>
      named[index] === undefined &&
      !SCALE_FILLERS.has(word) &&
      !/^lin(?:ear)?$|^lineal$|^lineaire$/.test(word),
  );
  if (unknown.length > 0) return null;
  const linear = words.some((word) => /^lin/.test(word) && SCALE_OF_WORD.get(word) === undefined);
  const has = (scale: ScaleName) => named.includes(scale);
  const rms = words.includes('rms');
  if (has('log') && (rms || has('voltage'))) return null;
  if (has('log')) return 'log';
  if (has('power') && has('voltage')) return null;
  if (has('power')) return 'power';
  return has('voltage') || linear ? 'voltage' : null;
}

/** What a bandwidth is measured at, or null. An impulse bandwidth is none of them. */
export function rbwKindFromText(text: string): KindName | null {
  const plain = plainWords(text).replace(/[\u2212\u2010-\u2013]/g, '-');
  if (/^\W*-?\s*3(?:[.,]0+)?\s*(?:db)?\b/.test(plain) || /(?:^|[^\d.,])3\s*db/.test(plain)) return '3dB';
  if (/^\W*-?\s*6(?:[.,]0+)?\s*(?:db)?\b/.test(plain) || /(?:^|[^\d.,])6\s*db/.test(plain)) return '6dB';
  const bare = bareKey(plain);
  if (/^(?:normal|halfpower|normal3db)$/.test(bare)) return '3dB';
  if (/^(?:emi|cispr|cispr16|emiquasipeak|halfvoltage)$/.test(bare)) return '6dB';
  if (
    /^(?:enbw|noise|noisebandwidth|noisebw|nbw|equivalentnoise(?:bandwidth|bw)?|noiseequivalent(?:bandwidth)?|rausch(?:bandbreite)?|bruit|ruido)$/.test(
      bare,
    )
  )
    return 'noise';
  return null;
}

const POLES = new Map<number, ShapeName>([
  [1, 'poles1'],
  [2, 'poles2'],
  [3, 'poles3'],
  [4, 'poles4'],
  [5, 'poles5'],
]);

const NUMBER_WORDS = new Map([
  ['single', 1],
  ['one', 1],
  ['two', 2],
  ['three', 3],
  ['four', 4],
  ['five', 5],
]);

/** The filter's shape or FFT window that a text names, or null. */
export function filterShapeFromText(text: string): ShapeName | null {
  const plain = plainWords(text);
  const poles =
    /(\d+|single|one|two|three|four|five)\W*(?:pole|polig|pol\b|polos|tuned)|(?:pole|poles|polos)\D{0,3}(\d+)|sync\w*\D*(\d+)|poles?(\d+)/.exec(
      plain,
    );
  if (poles) {
    const word = poles[1] ?? poles[2] ?? poles[3] ?? poles[4];
    return POLES.get(NUMBER_WORDS.get(word) ?? Number(word)) ?? null;
  }
  const bare = bareKey(plain).replace(/(?:window|fenster|filter|filtre|filtro|shape|type|shaped|form)+$/, '');
  const windowed = /window|fenster|fft|fenetre|ventana/.test(plain);
  const inner = bare.replace(/^fft(?:window)?/, '');
  if (
    /^(?:near|digital|approx)?gau(?:ss|ssian|sian|ssien|ssiano|sss?formig|ssfilter)(?:[-\d]*d?b?)?$/.test(
      inner,
    )
  )
    return 'gaussian';
  if (/^(?:hann|hanning|vonhann)$/.test(inner)) return 'fftHann';
  if (/^hamming$/.test(inner)) return 'fftHamming';
  if (/^blackman$/.test(inner)) return 'fftBlackman';
  if (
    /^(?:blackmanharris|bh|4termblackmanharris|blackmanharris4term|bh4|bh92|blackmanharris92db)$/.test(inner)
  )
    return 'fftBlackmanHarris';
  if (/^(?:flattop|flattopp)$/.test(inner)) return windowed || /flat/.test(inner) ? 'fftFlatTop' : null;
  if (/^(?:uniform|boxcar|nowindow)$/.test(inner)) return 'fftRectangular';
  if (/^(?:rect|rectangular|rectangle|rechteck|rechteckig|brickwall|ideal|rectangulaire)$/.test(inner))
    return windowed ? 'fftRectangular' : 'rectangular';
  return null;
}

const ON =
  /^(?:on|yes|true|1|enabled?|active|ein|an|ja|aktiv|wahr|oui|marche|actif|active|vrai|si|activado|encendido|verdadero)$/;
const OFF =
  /^(?:off|no|false|0|disabled?|inactive|none|aus|nein|inaktiv|falsch|non|arret|inactif|faux|desactivado|apagado|falso|bypass(?:ed)?|out)$/;

/** On or off in the usual words, or null. */
export function switchFromText(text: string): boolean | null {
  const bare = bareKey(text);
  if (ON.test(bare)) return true;
  return OFF.test(bare) ? false : null;
}
