import { ElementList } from '../../canvas/inspector/element-link.tsx';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { elementKey } from '../../drawing/decorations.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { failedKind, failedName } from './failable.ts';
import { outageSentence, pointName, type OutageFacts } from './outage-facts.ts';

interface OutageSideProps {
  readonly design: Design;
  readonly failed: readonly ElementRef[];
  readonly facts: OutageFacts | undefined;
  readonly onRestore: (ref: ElementRef) => void;
  readonly onRestoreAll: () => void;
}

const mostNamed = 12;

/** What has failed, with the way to restore it, and what has come of it. */
export function OutageSide({ design, failed, facts, onRestore, onRestoreAll }: OutageSideProps) {
  return (
    <div className="flex flex-col gap-12 p-14">
      <header>
        <p className="text-note text-ink-2">Outage</p>
        <h2 className="text-title text-ink">
          {failed.length === 0 ? 'Nothing has failed' : 'What has failed'}
        </h2>
      </header>
      {failed.length === 0 ? (
        <p className="text-base text-ink-2">
          Press a device, one member of a pair, a cable, a landing, a tunnel, an association or a transport on
          the sheet to fail it. A second press restores it.
        </p>
      ) : (
        <>
          <ul className="border-t border-rule">
            {failed.map((ref) => (
              <li
                key={elementKey(ref)}
                className="flex items-center gap-8 border-b border-rule py-4 text-base"
              >
                <span className="min-w-0 flex-1 break-words">
                  <span className="font-semibold text-ink">{failedName(design, ref)}</span>
                  <span className="block text-note text-ink-2">{failedKind(design, ref)}</span>
                </span>
                <Button
                  small
                  aria-label={`Restore ${failedName(design, ref)}`}
                  onClick={() => onRestore(ref)}
                >
                  Restore
                </Button>
              </li>
            ))}
          </ul>
          {failed.length > 1 && (
            <Button small className="self-start" icon={<Icon name="undo" size={14} />} onClick={onRestoreAll}>
              Restore all
            </Button>
          )}
        </>
      )}
      {facts !== undefined && failed.length > 0 && <Consequences design={design} facts={facts} />}
    </div>
  );
}

function Consequences({ design, facts }: { readonly design: Design; readonly facts: OutageFacts }) {
  const { outage } = facts;
  return (
    <>
      <p className="text-base font-semibold text-ink">{outageSentence(facts)}</p>
      {outage.segments.map(({ segment, pairCount, cutOff }) => (
        <section key={segment} className="text-base">
          <h3 className="font-semibold text-ink">
            {design.segments[segment]!.letter} {design.segments[segment]!.name}
          </h3>
          <p className="text-ink-2">
            {pairCount} {pairCount === 1 ? 'pair' : 'pairs'} of hosts parted
            {cutOff.length > 0 &&
              `; cut off from everybody: ${named(cutOff.map((at) => pointName(design, at)))}`}
            .
          </p>
        </section>
      ))}
      {outage.gone.length > 0 && (
        <Listing title="Out of service" words={named(outage.gone.map((at) => pointName(design, at)))} />
      )}
      {outage.failedOver.length > 0 && (
        <Listing
          title="Changed over"
          words={named(
            outage.failedOver.map(
              ({ device, active }) =>
                `${failedName(design, { collection: 'devices', id: device, member: active })} forwards now`,
            ),
          )}
        />
      )}
      {outage.tunnelsDown.length > 0 && (
        <section className="text-base">
          <h3 className="font-semibold text-ink">Tunnels down</h3>
          <ElementList
            of={outage.tunnelsDown
              .slice(0, mostNamed)
              .map(({ tunnel }) => ({ collection: 'tunnels', id: tunnel }))}
            empty=""
          />
          {outage.tunnelsDown.length > mostNamed && (
            <p className="text-ink-2">and {outage.tunnelsDown.length - mostNamed} more</p>
          )}
        </section>
      )}
      {outage.tunnelsMoved.length > 0 && (
        <Listing
          title="Run over other landings now"
          words={named(
            outage.tunnelsMoved.map(
              ({ tunnel, to }) =>
                `${design.tunnels[tunnel]!.name} (${design.transports[to.transport]!.name})`,
            ),
          )}
        />
      )}
    </>
  );
}

const named = (names: readonly string[]): string =>
  names.length <= mostNamed
    ? names.join(', ')
    : `${names.slice(0, mostNamed).join(', ')} and ${names.length - mostNamed} more`;

const Listing = ({ title, words }: { readonly title: string; readonly words: string }) => (
  <section className="text-base">
    <h3 className="font-semibold text-ink">{title}</h3>
    <p className="text-ink-2">{words}</p>
  </section>
);
