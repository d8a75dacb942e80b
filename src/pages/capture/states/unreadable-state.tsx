import type { Capture } from '../../../../shared/capture.ts';
import { captureFileUrl } from '../../../api/captures.ts';
import { buttonClass } from '../../../components/ui/button.tsx';
import { Message, toneOfSeverity } from '../../../components/ui/message.tsx';
import { Link } from 'react-router-dom';
import { fileSize } from '../../../lib/format.ts';

/** A file that is no trace, or one with something in it that can't be read: what, where, and what to export instead. */
export function UnreadableState({ capture }: { capture: Capture }) {
  const { problem, problems, understanding } = capture;
  const others = problems.filter(({ code, line }) => code !== problem?.code || line !== problem.line);
  return (
    <div className="mt-5 max-w-[760px] border-t border-ink pt-1">
      <Message
        tone="stopped"
        title={problem?.message ?? 'The file can’t be read.'}
        actions={
          <div className="flex flex-wrap gap-2.5 pt-2">
            <a
              className={buttonClass('secondary')}
              href={captureFileUrl(capture.id)}
              download={capture.fileName}
            >
              Download the file, {fileSize(capture.bytes)}
            </a>
            <Link className={buttonClass('quiet')} to="/captures">
              Upload another export
            </Link>
          </div>
        }
      >
        {problem?.line !== undefined && (
          <>
            Line <span className="font-mono">{problem.line}</span> of the file.{' '}
          </>
        )}
        {problem?.advice ?? 'Export the trace as CSV or text with a frequency and a level column.'} The file
        is kept byte for byte; no estimate was made of it.
      </Message>
      {others.map(({ code, severity, message, advice, line }) => (
        <Message key={`${code}-${line ?? 0}`} tone={toneOfSeverity[severity]} title={message}>
          {line !== undefined && (
            <>
              Line <span className="font-mono">{line}</span>.{' '}
            </>
          )}
          {advice}
        </Message>
      ))}
      {understanding !== null && (
        <Message tone="note" title="What was understood of it.">
          {understanding.sentence}
        </Message>
      )}
    </div>
  );
}
