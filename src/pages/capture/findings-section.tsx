import type { ReaderProblem } from '../../../shared/capture.ts';
import type { Finding, Severity } from '../../../shared/estimate.ts';
import { LinkButton } from '../../components/ui/button.tsx';
import { Message, toneOfSeverity } from '../../components/ui/message.tsx';
import { jumpToSection, Section } from '../../components/ui/section.tsx';
import type { DraftControls, SectionProps } from './contract.ts';
import { FINDING_ACTIONS, type FindingAction } from './finding-actions.ts';
import { jumpToSetting } from './jump.ts';

const ORDER: Record<Severity, number> = { stop: 0, caution: 1, note: 2 };

type Line = { severity: Severity } & ({ finding: Finding } | { problem: ReaderProblem });

function asideOf(lines: readonly Line[]): string {
  const count = (severity: Severity) => lines.filter((line) => line.severity === severity).length;
  const [stops, cautions, notes] = [count('stop'), count('caution'), count('note')];
  const words = [
    stops > 0 ? `${stops} stopped` : '',
    cautions > 0 ? `${cautions} ${cautions === 1 ? 'caution' : 'cautions'}` : '',
    notes > 0 ? `${notes} ${notes === 1 ? 'note' : 'notes'}` : '',
  ].filter((word) => word !== '');
  return words.join(', ');
}

/** What was found, how it is known and what to do; the reader's remarks with the line of the file. */
export function FindingsSection({ capture, estimate, draft, readOnly }: SectionProps) {
  const lines: Line[] = [
    ...(estimate?.findings ?? []).map((finding) => ({ severity: finding.severity, finding })),
    ...capture.problems.map((problem) => ({ severity: problem.severity, problem })),
  ].sort((a, b) => ORDER[a.severity] - ORDER[b.severity]);
  return (
    <Section number={6} title="Findings" aside={asideOf(lines)}>
      {lines.length === 0 && <p className="py-1 text-table text-ink2">Nothing was found.</p>}
      {lines.map((line) =>
        'finding' in line ? (
          <Message
            key={line.finding.code}
            tone={toneOfSeverity[line.severity]}
            title={line.finding.message}
            actions={actionsOf(line.finding, draft, readOnly)}
          >
            {line.finding.evidence} {line.finding.advice}
          </Message>
        ) : (
          <Message
            key={`${line.problem.code}-${line.problem.line ?? 0}`}
            tone={toneOfSeverity[line.severity]}
            title={line.problem.message}
          >
            {line.problem.line !== undefined && (
              <>
                Line <span className="font-mono">{line.problem.line}</span> of the file.{' '}
              </>
            )}
            {line.problem.advice}
          </Message>
        ),
      )}
    </Section>
  );
}

function actionsOf({ code }: Finding, draft: DraftControls, readOnly: boolean) {
  const actions = Object.hasOwn(FINDING_ACTIONS, code) ? FINDING_ACTIONS[code] : [];
  const possible = actions.filter(({ section }) => !readOnly || section !== undefined);
  if (possible.length === 0) return undefined;
  const run = ({ set, field, section }: FindingAction) => {
    if (set !== undefined) draft.setSettings(set);
    if (field !== undefined) jumpToSetting(field);
    if (section !== undefined) jumpToSection(section);
  };
  return possible.map((action) => (
    <LinkButton key={action.words} onClick={() => run(action)} className="print:hidden">
      {action.words}
    </LinkButton>
  ));
}
