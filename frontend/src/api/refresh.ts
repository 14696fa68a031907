const RENEWED_AT = 'maslin.renewedAt'

/** Access tokens live ten minutes; one about to end is renewed before it is refused. */
const RENEW_AFTER = 9 * 60_000

let underway: Promise<boolean> | undefined

function renewedAt(): number {
  return Number(localStorage.getItem(RENEWED_AT) ?? 0)
}

/** Notes that a fresh session has come in, by signing in or by a renewal. */
export function noteRenewal(): void {
  localStorage.setItem(RENEWED_AT, String(Date.now()))
}

/** True where the access token is about to end. False also for a visitor, who has none. */
export function isRenewalDue(now = Date.now()): boolean {
  const at = renewedAt()
  return at > 0 && now - at > RENEW_AFTER
}

export function forgetRenewal(): void {
  localStorage.removeItem(RENEWED_AT)
}

async function renew(since: number): Promise<boolean> {
  // Another tab may have renewed while this one waited for the lock: its cookie is ours too.
  if (renewedAt() > since) return true
  const response = await fetch('/api/v1/auth/refresh', { method: 'POST', credentials: 'same-origin' })
  if (response.status >= 500 || response.status === 429)
    throw new Error(`refresh answered ${response.status}`)
  if (!response.ok) return false
  noteRenewal()
  return true
}

/**
 * Renews the session once for all who ask at the same time, in this tab and, where the browser has locks, in the others:
 * a refresh token used twice looks like a stolen one.
 * @param since when the refused request was sent, milliseconds; a renewal after that counts as ours
 * @returns false where the session has ended
 * @throws where the API did not answer, so that nobody is signed out by a server that is down
 */
export function refreshSession(since: number): Promise<boolean> {
  // Missing where a page is not served securely.
  const locks = navigator.locks as LockManager | null | undefined
  underway ??= (locks ? locks.request('maslin-session', () => renew(since)) : renew(since)).finally(() => {
    underway = undefined
  })
  return underway
}
