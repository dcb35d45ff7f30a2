/** For searching and sorting: lower case, without accents. */
export function foldCase(text: string): string {
  return text
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .replace(/[đĐ]/g, 'd')
    .replace(/[øØ]/g, 'o')
    .replace(/[łŁ]/g, 'l')
    .toLocaleLowerCase('en');
}

/** Cuts at a word's end and adds an ellipsis; `max` counts characters of the result. */
export function excerpt(text: string, max: number): string {
  if (text.length <= max) return text;
  const cut = text.slice(0, max - 1);
  const space = cut.lastIndexOf(' ');
  return `${(space > max / 2 ? cut.slice(0, space) : cut).trimEnd()}…`;
}

/** `1 talk`, `3 talks`; a second word for irregular plurals. */
export function count(n: number, one: string, many = `${one}s`): string {
  return `${n} ${n === 1 ? one : many}`;
}

/** `a`, `a and b`, `a, b and c`. */
export function listInWords(words: readonly string[]): string {
  if (words.length <= 1) return words[0] ?? '';
  return `${words.slice(0, -1).join(', ')} and ${words[words.length - 1]}`;
}

/** A CSV or spreadsheet cell that no program takes for a formula (OWASP ASVS 5.0 1.2.10): a leading = + - @ TAB CR gets a quote. */
export function neutralCell(value: string): string {
  return /^[=+\-@\t\r\0]/.test(value) ? `'${value}` : value;
}
