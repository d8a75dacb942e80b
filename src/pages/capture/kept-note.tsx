import { LinkButton } from '../../components/ui/button.tsx';
import { Message } from '../../components/ui/message.tsx';
import { jumpToSection } from '../../components/ui/section.tsx';

/** Says that an estimate was kept, until the next change. */
export function KeptNote({ number }: { number: number }) {
  return (
    <div className="mt-3 border-t border-rule print:hidden">
      <Message
        tone="note"
        live="polite"
        title={`Estimate ${number} kept.`}
        actions={<LinkButton onClick={() => jumpToSection(7)}>See it in §7</LinkButton>}
      />
    </div>
  );
}
