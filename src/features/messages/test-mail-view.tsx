import { useQuery } from '@tanstack/react-query';
import { useState, type ReactNode } from 'react';
import { fillPath } from '@shared/http/endpoint';
import {
  downloadTestAttachment,
  downloadTestCalendar,
  type TestMail,
} from '@shared/features/messages/messages.contract';
import { Segmented } from '@/components/field';
import { Facts } from '@/components/page-bar';
import { QueryView } from '@/components/states';
import { formatBytes, ownTime } from '@/lib/format';
import { calendarFacts } from './calendar-facts';
import { testMailQuery } from './messages.queries';

type View = 'html' | 'text' | 'calendar' | 'head';
const labels: Record<View, string> = {
  html: 'As it looks',
  text: 'Plain text',
  calendar: 'Calendar part',
  head: 'Whole head',
};

/** One letter of the test mailbox: as it looks, its text, its calendar part, its head. */
export function TestMailView({ id }: { id: string }) {
  const query = useQuery(testMailQuery(id));
  const [view, setView] = useState<View>('html');
  return (
    <QueryView query={query} what="the letter">
      {(mail) => {
        const views = (Object.keys(labels) as View[]).filter(
          (one) => (one !== 'calendar' || mail.calendar) && (one !== 'html' || mail.html),
        );
        const shown = views.includes(view) ? view : 'text';
        return (
          <article className="grid gap-4">
            <h2 className="font-serif text-[20px] leading-[26px] break-words">{mail.subject}</h2>
            <Facts
              items={[
                ['From', mail.from],
                ['To', mail.to],
                ['Came', ownTime(mail.at)],
                mail.attachments.length > 0 && ['Attached', <Attachments mail={mail} />],
              ]}
            />
            <div className="max-w-full overflow-x-auto">
              <Segmented
                label="How it is shown"
                options={views.map((value) => ({ value, label: labels[value] }))}
                value={shown}
                onChange={setView}
              />
            </div>
            <Part mail={mail} view={shown} />
          </article>
        );
      }}
    </QueryView>
  );
}

function Attachments({ mail }: { mail: TestMail }) {
  return (
    <ul>
      {mail.attachments.map(({ name, bytes }, index) => (
        <li key={`${name} ${index}`}>
          <a download href={fillPath(downloadTestAttachment.path, { mail: mail.id, index })}>
            {name}
          </a>{' '}
          <span className="text-ink3">{formatBytes(bytes)}</span>
        </li>
      ))}
    </ul>
  );
}

function Part({ mail, view }: { mail: TestMail; view: View }) {
  if (view === 'html') return <HtmlLetter mail={mail} />;
  if (view === 'text') return <Verbatim label="Plain text of the letter">{withLinks(mail.text)}</Verbatim>;
  if (view === 'head')
    return (
      <Verbatim label="Head of the letter">
        {mail.headers.map(({ name, value }) => `${name}: ${value}`).join('\n')}
      </Verbatim>
    );
  const calendar = mail.calendar ?? '';
  return (
    <div className="grid gap-4">
      <Facts items={calendarFacts(calendar)} />
      <p>
        <a download href={fillPath(downloadTestCalendar.path, { mail: mail.id })}>
          Save the calendar file
        </a>
      </p>
      <Verbatim label="Calendar part as it came">{calendar}</Verbatim>
    </div>
  );
}

/** In a sandbox without scripts and of no origin; it inherits the page's policy, so that a letter can load nothing. Links open beside it. */
function HtmlLetter({ mail }: { mail: TestMail }) {
  const html = mail.html.replace(/<a /g, '<a target="_blank" rel="noopener noreferrer" ');
  return (
    <iframe
      title={`Letter: ${mail.subject}`}
      sandbox="allow-popups allow-popups-to-escape-sandbox"
      srcDoc={html}
      className="h-[640px] w-full border border-rule bg-sheet"
    />
  );
}

function Verbatim({ label, children }: { label: string; children: ReactNode }) {
  return (
    <pre
      tabIndex={0}
      aria-label={label}
      className="overflow-x-auto border-t border-b border-rule py-3 font-mono text-dense break-words whitespace-pre-wrap"
    >
      {children}
    </pre>
  );
}

const withLinks = (text: string): ReactNode[] =>
  text.split(/(https?:\/\/[^\s<>"]+)/).map((piece, index) =>
    index % 2 === 1 ? (
      <a key={index} href={piece} target="_blank" rel="noopener noreferrer">
        {piece}
      </a>
    ) : (
      piece
    ),
  );
