/** Plain text of an event: paragraphs divided by empty lines. */
export function Paragraphs({ text, className = '' }: { text: string; className?: string }) {
  return text
    .split(/\n\s*\n/)
    .filter((paragraph) => paragraph.trim() !== '')
    .map((paragraph, index) => (
      <p key={index} className={className}>
        {paragraph}
      </p>
    ));
}
