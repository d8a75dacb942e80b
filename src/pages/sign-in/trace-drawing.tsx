import { fixed } from '../../lib/format.ts';
import type { SimulatedTrace } from './simulated-trace.ts';

const WIDTH = 860;
const HEIGHT = 470;
const FRAME = { left: 44, right: 796, top: 22, bottom: 430 };
const LEVELS = [-85, -90, -95, -100, -105, -110];
const TOP_DBM = -84;
const BOTTOM_DBM = -114;

const yOf = (dbm: number) =>
  FRAME.top + ((TOP_DBM - dbm) / (TOP_DBM - BOTTOM_DBM)) * (FRAME.bottom - FRAME.top);

/** The simulated trace with its spurs left out and its floor, as the capture screen draws one. */
export function TraceDrawing({ trace }: { trace: SimulatedTrace }) {
  const { frequencyHz, levelDbm, spurs, meanDbm } = trace;
  const first = frequencyHz[0];
  const last = frequencyHz[frequencyHz.length - 1];
  const xOf = (hz: number) => FRAME.left + ((hz - first) / (last - first)) * (FRAME.right - FRAME.left);
  const inSpur = (hz: number) => spurs.some(({ fromHz, toHz }) => hz >= fromHz && hz <= toHz);
  const pathWhere = (keep: (hz: number) => boolean) => {
    let pen = 'M';
    let path = '';
    frequencyHz.forEach((hz, i) => {
      if (!keep(hz)) {
        pen = 'M';
        return;
      }
      path += `${pen}${xOf(hz).toFixed(1)} ${yOf(levelDbm[i]).toFixed(1)}`;
      pen = 'L';
    });
    return path;
  };
  const edges = [first, ...spurs.flatMap(({ fromHz, toHz }) => [fromHz, toHz]), last];
  const used = Array.from({ length: edges.length / 2 }, (_, i) => [edges[2 * i], edges[2 * i + 1]] as const);

  return (
    <svg
      viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
      className="block w-full font-mono text-tick"
      role="img"
      aria-label={`A simulated trace from 69.5 to 70.5 MHz: three spurs over a floor that reads ${fixed(meanDbm, 2)} dBm in a 10 kHz filter.`}
    >
      <defs>
        <pattern
          id="left-out"
          width="5"
          height="5"
          patternUnits="userSpaceOnUse"
          patternTransform="rotate(45)"
        >
          <path d="M0 0V5" stroke="var(--spur)" strokeOpacity=".3" />
        </pattern>
      </defs>
      <text x={FRAME.left} y="12" className="fill-ink2 font-sans text-caption">
        dBm in the 10 kHz filter
      </text>
      <rect
        x={FRAME.left}
        y={FRAME.top}
        width={FRAME.right - FRAME.left}
        height={FRAME.bottom - FRAME.top}
        className="fill-sheet"
      />
      {LEVELS.map((dbm) => (
        <g key={dbm}>
          <path d={`M${FRAME.left} ${yOf(dbm)}H${FRAME.right}`} className="stroke-rule2" />
          <text x={FRAME.left - 8} y={yOf(dbm) + 4} textAnchor="end" className="fill-ink3">
            {fixed(dbm, 0)}
          </text>
        </g>
      ))}
      {spurs.map(({ hz, fromHz, toHz }) => (
        <g key={hz}>
          <rect
            x={xOf(fromHz)}
            y={FRAME.top}
            width={xOf(toHz) - xOf(fromHz)}
            height={FRAME.bottom - FRAME.top}
            fill="url(#left-out)"
          />
          <path
            d={`M${xOf(fromHz)} ${FRAME.top}V${FRAME.bottom}M${xOf(toHz)} ${FRAME.top}V${FRAME.bottom}`}
            className="stroke-spur"
            strokeWidth=".7"
            strokeOpacity=".6"
          />
        </g>
      ))}
      <path d={pathWhere(inSpur)} fill="none" className="stroke-trace-x" strokeWidth=".85" />
      <path
        d={pathWhere((hz) => !inSpur(hz))}
        fill="none"
        className="stroke-trace"
        strokeWidth=".85"
        strokeLinejoin="round"
      />
      <path d={`M${FRAME.left} ${yOf(meanDbm)}H${FRAME.right}`} className="stroke-est" strokeWidth="1.8" />
      <text x={FRAME.right + 8} y={yOf(meanDbm) + 4} className="fill-est font-medium">
        {fixed(meanDbm, 2)}
      </text>
      {spurs.map(({ hz, levelDbm: dbm }, index) => (
        <g key={hz} className="fill-spur">
          <path d={`M${xOf(hz)} ${yOf(dbm)}V${FRAME.bottom}`} className="stroke-spur" strokeWidth="1.2" />
          <path d={`M${xOf(hz)} ${yOf(dbm) - 4.3}l4.3 4.3-4.3 4.3-4.3-4.3z`} />
          <text x={xOf(hz) + 22} y={yOf(dbm) + 3}>
            {`S${index + 1} ${fixed(hz / 1e6, 3)} MHz`}
          </text>
          <text x={xOf(hz) + 22} y={yOf(dbm) + 17}>
            {`${fixed(dbm, 1)} dBm`}
          </text>
        </g>
      ))}
      <path d={`M${FRAME.left} ${FRAME.bottom}H${FRAME.right}`} className="stroke-ink" />
      {used.map(([from, to]) => (
        <path
          key={from}
          d={`M${xOf(from)} ${FRAME.bottom + 8}H${xOf(to)}`}
          className="stroke-est"
          strokeWidth="4"
          strokeOpacity=".85"
        />
      ))}
      {[69.5, 69.75, 70, 70.25, 70.5].map((mhz) => (
        <text key={mhz} x={xOf(mhz * 1e6)} y={FRAME.bottom + 26} textAnchor="middle" className="fill-ink3">
          {fixed(mhz, 2)}
        </text>
      ))}
      <text x={FRAME.right + 26} y={FRAME.bottom + 26} className="fill-ink2 font-sans text-caption">
        MHz
      </text>
    </svg>
  );
}
