/**
 * One request to our own interface. `Answer` is what docs/http-contract.md promises of this address. Retrying is left to whoever calls.
 * @throws what `readFailure` reads
 */
export function callApi<Answer = void>(path: string, options: { method?: 'GET' | 'POST' | 'PATCH' | 'DELETE', body?: object } = {}): Promise<Answer> {
  return $fetch<Answer, string>(path, { ...options, retry: false }) as Promise<Answer>
}
