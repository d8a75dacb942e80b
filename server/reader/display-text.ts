// Control characters, zero-width and bidirectional marks: they could make a name look like another one.

const HIDDEN = /[\u0000-\u001f\u007f-\u009f\u200b-\u200f\u2028-\u202e\u2060-\u2069\ufeff\ufffe\uffff]/g;

/** Text of a file made safe to show: hidden characters out, blanks collapsed, at most `longest` characters. */
export function displayText(text: string, longest = 120): string {
  const clean = text.replace(HIDDEN, ' ').replace(/\s+/g, ' ').trim();
  return clean.length > longest ? `${clean.slice(0, longest - 1)}…` : clean;
}
