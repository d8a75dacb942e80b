import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import type { Capture } from '../../../shared/capture.ts';
import { captureFileUrl } from '../../api/captures.ts';
import { PageHead } from '../../components/layout/page-head.tsx';
import { countWords } from '../../lib/format.ts';
import { dayAndTime, fullTime, zoneName } from '../../lib/time.ts';
import { CaptureName } from './rename.tsx';

/** Trail, name, file, who and when; state and actions at the right. */
export function CaptureHeader({ capture, actions }: { capture: Capture; actions?: ReactNode }) {
  const { campaign } = capture;
  return (
    <PageHead
      documentTitle={`${capture.number} ${capture.name}`}
      above={
        <nav aria-label="Trail">
          <Link className="link" to="/captures">
            Captures
          </Link>
          <Slash />
          {campaign !== null && (
            <>
              <Link className="link" to={`/captures?campaign=${campaign.id}`}>
                {campaign.name}
              </Link>
              <Slash />
            </>
          )}
          <span className="font-mono">{capture.number}</span>
        </nav>
      }
      title={<CaptureName capture={capture} />}
      below={
        <>
          <a
            className="link font-mono break-all"
            href={captureFileUrl(capture.id)}
            download={capture.fileName}
          >
            {capture.fileName}
          </a>
          {capture.points !== null && (
            <>
              , <span className="font-mono">{countWords(capture.points)}</span> points
            </>
          )}
          , {capture.uploadedBy.name},{' '}
          <time
            dateTime={capture.uploadedAt}
            title={fullTime(capture.uploadedAt)}
            className="whitespace-nowrap"
          >
            {dayAndTime(capture.uploadedAt)} {zoneName(new Date(capture.uploadedAt))}
          </time>
        </>
      }
      actions={actions}
    />
  );
}

const Slash = () => (
  <span aria-hidden="true" className="mx-2 text-ink3">
    /
  </span>
);
