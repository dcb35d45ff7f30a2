/** First in the tab order: past header and navigation. */
export function SkipLink() {
  return (
    <a href="#work" className="skip">
      To the content
    </a>
  );
}
