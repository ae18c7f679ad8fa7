/** First in the tab order; leads past the header to the page's own content. */
export function SkipLink() {
  return (
    <a
      href="#content"
      className="absolute top-2 left-2 z-50 -translate-y-24 border border-ink bg-paper px-4 py-2 font-semibold focus:translate-y-0"
    >
      Skip to the content
    </a>
  );
}
