const address = /(https?:\/\/[^\s<>"]+)/;

/** Plain text whose addresses can be pressed, as mail programs show it. */
export function TextWithLinks({ text }: { readonly text: string }) {
  return text.split(address).map((piece, at) =>
    // Every second piece is what the pattern caught.
    at % 2 === 1 ? (
      <a key={at} href={piece} target="_blank" rel="noreferrer" className="break-all text-blue underline">
        {piece}
      </a>
    ) : (
      piece
    ),
  );
}
