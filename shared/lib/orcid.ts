/**
 * The check character of an ORCID iD's first 15 digits: ISO 7064 MOD 11-2 as ORCID publishes it
 * (total = (total + digit) * 2; check = (12 - total mod 11) mod 11; 10 is written X).
 */
export function orcidCheckDigit(digits15: string): string {
  let total = 0;
  for (const digit of digits15) total = (total + Number(digit)) * 2;
  const check = (12 - (total % 11)) % 11;
  return check === 10 ? 'X' : String(check);
}

/** Brings an iD or its address into the form 0000-0002-1825-0097; undefined when form or check character is wrong. */
export function parseOrcid(text: string): string | undefined {
  const bare = text.trim().replace(/^https?:\/\/orcid\.org\//i, '');
  if (!/^\d{4}-?\d{4}-?\d{4}-?\d{3}[\dXx]$/.test(bare)) return undefined;
  const plain = bare.replace(/-/g, '').toUpperCase();
  if (orcidCheckDigit(plain.slice(0, 15)) !== plain[15]) return undefined;
  return plain.replace(/(.{4})(?=.)/g, '$1-');
}
