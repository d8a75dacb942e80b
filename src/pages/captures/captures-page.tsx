export function CapturesPage() {
  return <h1>Captures</h1>;
}
