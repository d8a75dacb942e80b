/** A formula in plain text, with `^n`, `^(…)` raised and `_own` lowered. */
export function FormulaText({ text }: { text: string }) {
  const parts = text.split(/(\^\([^)]*\)|\^\w+|_\w+)/);
  return parts.map((part, index) => {
    const inner = part.slice(1).replace(/^\((.*)\)$/, '$1');
    if (part.startsWith('^')) return <sup key={index}>{inner}</sup>;
    if (part.startsWith('_')) return <sub key={index}>{inner}</sub>;
    return part;
  });
}
