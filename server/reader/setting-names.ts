import type { SettingName } from '../../shared/settings.ts';
import { bareKey } from './setting-words.ts';

/**
 * What a key of a preamble means: a setting, or one of these.
 * `averaging`: a scale, a count or on/off, by its value. `rbwFilter`: shape, kind or bandwidth, by its value.
 * `weakRbw`, `weakSweeps`: read as that with a finding, and only where no clearer key states it.
 * `levelOffset`, `transducer`: already in the levels, so told and not applied. `loss`: a gain with its sign turned.
 */
export type KeyMeaning =
  | SettingName
  | 'averaging'
  | 'averagingState'
  | 'rbwFilter'
  | 'noiseBandwidth'
  | 'weakRbw'
  | 'weakSweeps'
  | 'loss'
  | 'levelOffset'
  | 'transducer'
  | 'levelUnit'
  | 'frequencyUnit'
  | 'step'
  | 'date'
  | 'time'
  | 'traceMode'
  | 'traceName'
  | 'sweepType'
  | 'ignored';

const KEYS: [KeyMeaning, string][] = [
  [
    'rbwHz',
    `rbw | res bw | resbw | resolution bw | resolution bandwidth | res bandwidth | if bandwidth | ifbw | if bw | rbw value | actual rbw
    | auflösungsbandbreite | aufloesungsbandbreite | zf bandbreite | zf-bandbreite | bandbreite rbw
    | bande passante de résolution | largeur de bande de résolution | bande de résolution | bp résolution | résolution
    | ancho de banda de resolución | ab de resolución | banda de resolución | rbw frequency | rbw actual`,
  ],
  ['weakRbw', 'bandwidth | bw | bandbreite | bande passante | largeur de bande | ancho de banda'],
  [
    'rbwKind',
    `rbw kind | rbw type | rbw definition | rbw reference | bandwidth kind | bandwidth type | rbw filter bw | rbw filter bandwidth
    | resolution bandwidth type | resolution bandwidth kind | rbw bandwidth type | rbw art | rbw-typ | type de rbw | tipo de rbw`,
  ],
  [
    'filterShape',
    `filter shape | rbw shape | rbw filter shape | shape | filterform | forme du filtre | forma del filtro | fft window | fft window type
    | window type | fft fenster | fenêtre fft | ventana fft`,
  ],
  [
    'rbwFilter',
    'rbw filter | rbw filter type | filter type | filter | resolution filter | filtertyp | rbw-filter | type de filtre | tipo de filtro',
  ],
  [
    'noiseBandwidth',
    'noise bandwidth | noise bw | enbw | nbw | equivalent noise bandwidth | equivalent noise bw | effective noise bandwidth | rauschbandbreite | bande équivalente de bruit | ancho de banda de ruido',
  ],
  ['bandwidthRatio', 'bandwidth ratio | noise bandwidth ratio | enbw ratio'],
  ['bandwidthRatioUncertainty', 'bandwidth ratio uncertainty | noise bandwidth ratio uncertainty'],
  [
    'vbwHz',
    `vbw | video bw | videobw | video bandwidth | vid bw | actual vbw | vbw value | videobandbreite | bande passante vidéo | largeur de bande vidéo
    | bande vidéo | ancho de banda de vídeo | ancho de banda de video | banda de vídeo`,
  ],
  [
    'detector',
    `detector | det | trace detector | detector type | detector mode | det type | detection | detectors | detektor | detektortyp
    | détecteur | type de détecteur | détection | tipo de detector`,
  ],
  ['detectorScale', 'detector scale | average detector scale | detector average scale'],
  [
    'averaging',
    `average type | avg type | averaging type | average mode | avg mode | averaging mode | averaging | average | trace average | trace averaging | trace avg
    | averaging scale | average scale | avg scale | avg/vbw type | average/vbw type | avg | video average | sweep averaging
    | mittelung | mittelungstyp | mittelungsart | mittelwertbildung | mittelungsmodus
    | moyennage | type de moyenne | type de moyennage | mode de moyennage | moyenne
    | promediado | tipo de promedio | tipo de promediado | modo de promedio | promedio`,
  ],
  [
    'averagingState',
    'average state | averaging state | avg state | average on | averaging on | averaging enabled | average on/off | avg on/off | average enabled',
  ],
  [
    'sweeps',
    `sweeps | averages | average count | avg count | averaging count | average number | avg number | avgs | number of averages | no of averages | num averages | n averages
    | average factor | averaging factor | averages taken | sweep count | sweeps averaged | number of sweeps | no of sweeps | num sweeps | sweep number | avg hold number | avg/hold num
    | average/hold number | average sweeps | trace average count | averaged sweeps | averages done | completed averages
    | mittelungen | anzahl mittelungen | anzahl der mittelungen | mittelungsanzahl | anzahl sweeps | sweepanzahl | sweep-zähler | durchläufe | anzahl durchläufe
    | nombre de moyennes | moyennes | nombre de balayages | balayages
    | promedios | número de promedios | numero de promedios | nº de promedios | número de barridos | barridos`,
  ],
  ['weakSweeps', 'count | anzahl | nombre | número'],
  [
    'sweepTimeS',
    `sweep time | swp time | sweeptime | swt | sweep duration | scan time | acquisition sweep time | time per sweep
    | sweepzeit | sweepdauer | ablaufzeit | wobbelzeit | durchlaufzeit
    | temps de balayage | durée de balayage | tiempo de barrido | duración de barrido`,
  ],
  [
    'attenuationDb',
    `attenuation | att | atten | rf att | rf atten | rf attenuation | input attenuation | input att | attenuator | mech atten | mechanical attenuation | attenuation rf
    | dämpfung | daempfung | eingangsdämpfung | eingangsdaempfung | hf-dämpfung | hf dämpfung | hf-daempfung | abschwächung | abschwächer
    | atténuation | atténuateur | atténuation rf | affaiblissement | atenuación | atenuacion | atenuador | atenuación rf | atenuación de entrada`,
  ],
  [
    'preamplifier',
    `preamplifier | preamp | pre amp | pre-amp | pre amplifier | internal preamp | int preamp | preamplifier state | preamp state | preamp on | rf preamp | lna
    | vorverstärker | vorverstaerker | vorverst | préamplificateur | préampli | preamplificador | preamplificacion`,
  ],
  [
    'referenceLevelDbm',
    `reference level | ref level | ref lvl | ref lev | rl | reference | referenzpegel | bezugspegel | ref pegel | niveau de référence | nivel de referencia`,
  ],
  [
    'externalGainDb',
    `external gain | ext gain | external amplifier gain | external amp gain | ext amp gain | external preamp gain | ext preamp gain | device gain | gain to device | chain gain
    | externe verstärkung | externe verstaerkung | gain externe | ganancia externa`,
  ],
  ['externalGainUncertaintyDb', 'external gain uncertainty | ext gain uncertainty | gain uncertainty'],
  [
    'loss',
    'external loss | ext loss | external attenuation | ext att | ext atten | external attenuator | cable loss | externe dämpfung | perte externe | pérdida externa',
  ],
  [
    'levelOffset',
    `level offset | ref level offset | reference level offset | ref lvl offset | ref offset | rl offset | amplitude offset | amptd offset | offset level | offset
    | pegeloffset | referenzpegel-offset | décalage de niveau | desplazamiento de nivel`,
  ],
  [
    'transducer',
    'transducer | transducer factor | correction | corrections | amplitude correction | antenna factor | correction factor | transducer set',
  ],
  ['levelUncertaintyDb', 'level uncertainty | amplitude uncertainty | absolute level uncertainty'],
  ['ownNoiseDbmPerHz', 'own noise | own noise density | analyser noise density | own noise dbm per hz'],
  ['ownNoiseUncertaintyDb', 'own noise uncertainty'],
  [
    'impedanceOhm',
    'impedance | input impedance | z | system impedance | load impedance | ref impedance | reference impedance | impedanz | eingangsimpedanz | wellenwiderstand | impédance | impédance d entrée | impedancia | impedancia de entrada',
  ],
  [
    'sourceTemperatureK',
    'source temperature | source temp | noise source temperature | temperature of source',
  ],
  [
    'startHz',
    `start | start freq | start frequency | freq start | frequency start | f start | fstart | begin frequency | first frequency | x start | xstart | from | start f | lower frequency
    | startfrequenz | frequenz start | anfangsfrequenz | fréquence de début | fréquence début | fréquence de départ | fréquence départ | fréquence initiale | début | départ
    | frecuencia inicial | frecuencia de inicio | inicio | frecuencia inicio`,
  ],
  [
    'stopHz',
    `stop | stop freq | stop frequency | freq stop | frequency stop | f stop | fstop | end frequency | end freq | last frequency | x stop | xstop | to | end | stop f | upper frequency
    | stoppfrequenz | stopfrequenz | endfrequenz | frequenz stopp | fréquence de fin | fréquence fin | fréquence finale | fréquence d arrêt | fréquence arrêt | fin | arrêt
    | frecuencia final | frecuencia de fin | frecuencia de parada | frecuencia fin | parada`,
  ],
  [
    'centreHz',
    `centre | center | centre freq | center freq | centre frequency | center frequency | cf | freq center | frequency center | frequency centre | fc | f center | f centre | ctr freq
    | mittenfrequenz | mitte | fréquence centrale | centre fréquence | frecuencia central | frec central`,
  ],
  [
    'spanHz',
    `span | frequency span | freq span | span freq | span frequency | sweep span | darstellbreite | frequenzspan | frequenzbereich | plage de fréquence | plage | excursion | étendue
    | ancho de barrido | rango de frecuencia | expansión`,
  ],
  [
    'step',
    'step | step size | frequency step | freq step | freq step size | step frequency | bin width | bin size | bin spacing | point spacing | x increment | xincrement | x inc | delta f | df | frequency resolution | schrittweite | pas | pas de fréquence | paso | paso de frecuencia',
  ],
  [
    'statedPoints',
    `points | sweep points | number of points | no of points | num points | n points | trace points | points per sweep | data points | number of data points | point count | display points | values | samples in trace
    | measurement points | messpunkte | anzahl messpunkte | anzahl punkte | punkte | anzahl der messpunkte | sweeppunkte | sweep-punkte
    | nombre de points | points de mesure | puntos | número de puntos | numero de puntos | puntos de barrido | puntos de medida`,
  ],
  [
    'takenAt',
    'date and time | date time | datetime | timestamp | time stamp | date/time | acquired | acquired at | recorded | taken at | measurement time | datum und zeit | datum/uhrzeit | date et heure | fecha y hora',
  ],
  ['date', 'date | datum | fecha | measurement date'],
  ['time', 'time | uhrzeit | zeit | heure | hora | time of day'],
  [
    'instrument',
    'instrument | analyser | analyzer | spectrum analyser | spectrum analyzer | instrument name | instrument model | model | model number | device name | device type | gerät | geraet | messgerät | messgeraet | gerätetyp | appareil | instrumento | equipo | analizador',
  ],
  [
    'levelUnit',
    'unit | units | y unit | y-unit | y axis unit | y-axis unit | y axis units | y units | level unit | amplitude unit | amplitude units | amptd unit | trace unit | data unit | unit y | vertical unit | einheit | pegeleinheit | y-einheit | unité | unité y | unidad | unidad y | unidades',
  ],
  [
    'frequencyUnit',
    'x unit | x-unit | x axis unit | x-axis unit | x axis units | x units | frequency unit | frequency units | freq unit | unit x | horizontal unit | x-einheit | frequenzeinheit | unité x | unidad x | unité de fréquence | unidad de frecuencia',
  ],
  ['traceMode', 'trace mode | trace type | trace state | mode de trace | modo de traza | trace-modus'],
  ['traceName', 'trace | trace name | trace label | messkurve | courbe | traza'],
  [
    'sweepType',
    'sweep type | sweep mode | sweep spacing | x scale | x-scale | x axis scale | frequency scale',
  ],
  [
    'ignored',
    'trace count | window | frequency | fft width | rbw mode | rbw auto | vbw mode | vbw auto | vbw/rbw | vbw rbw ratio | rbw/vbw ratio | span/rbw | sweep time mode | swt auto | reference level position | detector mode auto | trace number | display window',
  ],
];

const MEANINGS = new Map<string, KeyMeaning>(
  KEYS.flatMap(([meaning, names]) =>
    names.split('|').map((name): [string, KeyMeaning] => [bareKey(name), meaning]),
  ),
);

/** What a key means, or null for one that names no setting. Case, blanks, dots, underscores and accents don’t matter. */
export function keyMeaning(key: string): KeyMeaning | null {
  const bare = bareKey(key);
  if (bare === '') return null;
  return MEANINGS.get(bare) ?? null;
}

const LONGEST_KEY_WORDS = 5;

/** The longest known key that a text begins with, and what follows it: `RBW 10 kHz` → rbw, `10 kHz`. */
export function leadingKey(text: string): { key: string; rest: string } | null {
  const words = text.trim().split(/\s+/);
  for (let count = Math.min(LONGEST_KEY_WORDS, words.length - 1); count >= 1; count -= 1) {
    const key = words.slice(0, count).join(' ');
    if (keyMeaning(key) !== null) return { key, rest: words.slice(count).join(' ') };
  }
  return null;
}
