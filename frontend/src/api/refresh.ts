const RENEWED_AT = 'maslin.renewedAt'

let underway: Promise<boolean> | undefined

function renewedAt(): number {
  return Number(localStorage.getItem(RENEWED_AT) ?? 0)
}

async function renew(since: number): Promise<boolean> {
  // Another tab may have renewed while this one waited for the lock: its cookie is ours too.
  if (renewedAt() > since) return true
  const response = await fetch('/api/v1/auth/refresh', { method: 'POST', credentials: 'same-origin' })
  if (response.status >= 500 || response.status === 429)
    throw new Error(`refresh answered ${response.status}`)
  if (!response.ok) return false
  localStorage.setItem(RENEWED_AT, String(Date.now()))
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
  underway ??= (
    'locks' in navigator ? navigator.locks.request('maslin-session', () => renew(since)) : renew(since)
  ).finally(() => {
    underway = undefined
  })
  return underway
}
