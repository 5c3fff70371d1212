const notes = [
  'Plans are for competent engineers. Verify on your equipment and follow your change control.',
  'Pre-shared keys are never stored here, only the names under which your team’s vault keeps them.',
  'A stretched segment joins failure domains. Safety-related traffic needs its own assessment.',
];

/** What everybody who plans with this must know. */
export function Cautions() {
  return (
    <section aria-labelledby="notes">
      <h2 id="notes" className="mb-6 text-section font-semibold">
        Notes
      </h2>
      <ol className="flex flex-col gap-5">
        {notes.map((note, at) => (
          <li key={note} className="flex gap-12 text-base text-ink-2">
            <span className="w-8 shrink-0 font-semibold text-ink">{at + 1}</span>
            {note}
          </li>
        ))}
      </ol>
    </section>
  );
}
