/** Paper, while the first screen's code is on its way. */
export function BlankPage() {
  return <div aria-busy="true" className="min-h-screen bg-paper" />;
}
