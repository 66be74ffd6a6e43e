/** What is tried first by anybody who guesses. Lower case, ten characters or more. */
const common = new Set([
  '1234567890', '12345678910', '0123456789', '0987654321', '1q2w3e4r5t', '1qaz2wsx3edc', 'qwertyuiop', 'qwerty12345', 'qwertzuiop', 'asdfghjkl1',
  'password12', 'password123', 'password1234', 'password12345', 'passwordpassword', 'passw0rd123', 'p@ssw0rd123', 'mypassword', 'newpassword', 'changeme123',
  'letmein123', 'letmein1234', 'welcome123', 'welcome1234', 'iloveyou12', 'iloveyou123', 'administrator', 'admin12345', 'admin123456', 'superadmin',
  'sprayshop1', 'spraybooth', 'spraybooth1', 'paintshop1', 'potbell123', 'potbell1234', 'let the pot ring', 'football123', 'baseball123', 'sunshine123',
  'monkey12345', 'dragon12345', 'abcdefghij', 'abcd123456', 'abc1234567', 'trustno123', 'summer2026', 'winter2026', 'secret1234', 'hellohello',
])

/** True for passwords that stand on every guesser's list, and for one character said over and over. */
export function isGuessable(password: string): boolean {
  const plain = password.trim().toLowerCase()
  return common.has(plain) || new Set(plain).size < 3
}

/** Without letters and digits that are taken for each other. 32 of them, so that five bits choose one. */
const letters = 'abcdefghijkmnpqrstuvwxyz23456789'

/**
 * A first password that can be read out and typed: `kfmt-xw7p-…`, 80 bits.
 *
 * @param random sixteen random bytes
 * @throws RangeError for fewer
 */
export function firstPassword(random: Uint8Array): string {
  if (random.length < 16) throw new RangeError('a first password needs sixteen random bytes')
  const typed = [...random.slice(0, 16)].map(byte => letters.charAt(byte & 31)).join('')
  return (typed.match(/.{4}/g) ?? []).join('-')
}
