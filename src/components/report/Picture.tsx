/** A chart of the edition, drawn once when it was made. */
export function Picture({ svg, label }: { svg: string | undefined; label: string }) {
  if (!svg) return <p className="hint">This picture could not be drawn; the table beside it says the same.</p>;
  return <figure className="frozen-chart" aria-label={label} dangerouslySetInnerHTML={{ __html: svg }} />;
}
