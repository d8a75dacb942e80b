export function SignInPage() {
  return <h1>Sign in</h1>;
}
