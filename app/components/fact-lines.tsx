// What a table of facts says of one name in several lines.

/** A fact of several lines. */
export function FactLines({ lines }: { lines: readonly string[] }) {
  const [only, ...more] = lines;
  if (more.length === 0) return only;
  return (
    <ul className="py-2">
      {lines.map((line) => (
        <li key={line}>{line}</li>
      ))}
    </ul>
  );
}
