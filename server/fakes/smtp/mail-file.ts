import { appendFileSync, existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import type { StoredMail } from './stored-mail';

export interface MailFile {
  /** Oldest first. */
  mails: StoredMail[];
  append(mail: StoredMail): void;
}

/**
 * One letter a line. A letter is on disk before the server says that it has taken it, so that a process killed between
 * the two loses nothing. A last line that was cut off by such an end is dropped: its sender was never told yes.
 */
export function openMailFile(file: string | null, keep: number): MailFile {
  if (!file) return { mails: [], append: () => undefined };
  mkdirSync(path.dirname(file), { recursive: true });
  const mails = existsSync(file) ? readLines(file).slice(-keep) : [];
  writeFileSync(`${file}.new`, mails.map((mail) => `${JSON.stringify(mail)}\n`).join(''));
  renameSync(`${file}.new`, file);
  return { mails, append: (mail) => appendFileSync(file, `${JSON.stringify(mail)}\n`) };
}

function readLines(file: string): StoredMail[] {
  return readFileSync(file, 'utf8')
    .split('\n')
    .flatMap((line) => {
      try {
        return line ? [JSON.parse(line) as StoredMail] : [];
      } catch {
        return [];
      }
    });
}
