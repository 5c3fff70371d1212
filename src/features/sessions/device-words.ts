/** What kind of thing signed in, as far as it says so of itself. */
export function deviceWords(userAgent: string): string {
  if (userAgent === '') return 'Unknown';
  // Common practice, no source: phones call themselves mobile, tablets don't or say what they are.
  if (/tablet|ipad/i.test(userAgent)) return 'Tablet';
  if (/mobi|iphone/i.test(userAgent)) return 'Phone';
  if (/android/i.test(userAgent)) return 'Tablet';
  if (/^mozilla\//i.test(userAgent)) return 'Computer';
  return 'Program';
}
