import { Link, useLocation } from 'react-router-dom';
import { Button, buttonClasses } from '../components/button.tsx';
import { ErrorNotice } from '../components/notice.tsx';
import { MainBar } from '../features/account/main-bar.tsx';
import { StackForm } from '../features/wire/stack-form.tsx';
import {
  readTexts,
  searchValuesOf,
  textsFrom,
  wireFields,
  type WireTexts,
} from '../features/wire/wire-fields.ts';
import { wireFigures } from '../features/wire/wire-figures.ts';
import { WireResults } from '../features/wire/wire-results.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { signInPath } from '../lib/return-path.ts';
import { useSession } from '../lib/session.ts';
import { useKeptFocus } from '../lib/use-kept-focus.ts';
import { useSearchValues } from '../lib/use-search-values.ts';

/** /wire?packet=…&mtu=…: what a packet becomes on the wire and what still fits, for anybody, without a design. */
export function WirePage() {
  usePageTitle('Wire');
  const session = useSession();
  const { pathname, search } = useLocation();
  const { valueOf, change } = useSearchValues();
  // Buttons go with what they were for.
  useKeptFocus(search);
  const texts = textsFrom(valueOf);
  const read = readTexts(texts);
  const answer = read.ok ? wireFigures(read.inputs) : read;
  const problems = answer.ok ? {} : answer.problems;
  const changeTexts = (changed: Partial<WireTexts>): void => change(searchValuesOf(changed));
  return (
    <>
      <MainBar>
        {session?.person === null && (
          <div className="ml-auto flex items-center px-12">
            <Link to={signInPath(`${pathname}${search}`)} className={buttonClasses({ kind: 'primary' })}>
              Sign in
            </Link>
          </div>
        )}
      </MainBar>
      <main
        id="main"
        tabIndex={-1}
        className="min-h-0 flex-1 overflow-y-auto px-28 pb-28 outline-none max-sm:px-14"
      >
        <div className="flex min-h-62 flex-wrap items-center gap-x-24 gap-y-4 py-12">
          <h1 className="text-page font-semibold">Wire</h1>
          <p className="min-w-0 flex-1 text-base text-ink-2 max-sm:basis-full">
            What a packet becomes between the host and the transport, and what still passes whole. The address
            of this page holds every input, so it can be sent to a colleague.
          </p>
          {search !== '' && <Button onClick={() => changeTexts(textsFrom(() => ''))}>Start again</Button>}
        </div>
        <div className="grid grid-cols-[356px_minmax(0,1fr)] items-start gap-28 max-lg:grid-cols-1">
          <StackForm texts={texts} problems={problems} onChange={changeTexts} />
          {answer.ok ? (
            <WireResults
              figures={answer.figures}
              onSend={(innerPacketBytes) =>
                changeTexts({ packet: wireFields.packet.write(innerPacketBytes) })
              }
            />
          ) : (
            <ErrorNotice>
              <p className="font-semibold">Nothing is computed until this is mended.</p>
              <ul className="mt-4 flex flex-col gap-2">
                {Object.values(problems).map((problem) => (
                  <li key={problem}>{problem}</li>
                ))}
              </ul>
            </ErrorNotice>
          )}
        </div>
      </main>
    </>
  );
}
