export function MethodPage() {
  return <h1>Method</h1>;
}
