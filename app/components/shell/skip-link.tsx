/** The first stop of the keyboard: past the header to the content. `<SkipLink />`, with `<main id="content" tabIndex={-1}>` */
export function SkipLink() {
  return (
    <a
      href="#content"
      className="sr-only z-50 bg-copper px-4 py-3 font-semibold text-on-copper focus:not-sr-only focus:fixed focus:top-2 focus:left-2"
    >
      Skip to the content
    </a>
  );
}
