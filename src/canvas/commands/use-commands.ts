import { useEffect, useMemo, useRef } from 'react';
import { showToast } from '../../components/toast.tsx';
import { around } from '../../drawing/routing/rects.ts';
import { anchorOf } from '../../drawing/routing/anchors.ts';
import { sheetsOf } from '../../drawing/sheets/sheet-numbers.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { useNumbering } from '../../workspace/checks-context.tsx';
import { newEntryId, useOpenDesign } from '../../workspace/open-design-context.tsx';
import type { Alignment } from '../../workspace/operations/align-parts.ts';
import { canCollapse, isCollapsed } from '../../workspace/operations/collapse-sites.ts';
import { pasteParts, type Parts } from '../../workspace/operations/copy-parts.ts';
import { canLock, isLocked } from '../../workspace/operations/move-parts.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';
import { farEnds } from '../actions/far-ends.ts';
import { segmentsOf } from '../actions/segments-of.ts';
import { useElementActions, type DeskActions } from '../actions/use-element-actions.ts';
import { boxesOf } from '../boxes-of.ts';
import {
  askToJoin,
  openMenu,
  setInspecting,
  setListingKeys,
  setSearching,
  setTool,
  startPlacing,
  useDesk,
} from '../desk-state.ts';
import { standingOf } from '../flow-changes-to-patch.ts';
import { useDrawn } from '../geometry-context.tsx';
import type { TrayPart } from '../place-part.ts';
import { useNudge } from '../use-nudge.ts';
import { tidied, useTidy } from '../use-tidy.ts';
import { useView } from '../use-view.ts';
import { useViewChoice } from '../use-view-choice.ts';
import type { CommandId } from './shortcuts.ts';

export interface Commands {
  readonly run: { readonly [Id in CommandId]: () => void };
  readonly actions: DeskActions;
  readonly paste: (parts: Parts) => void;
}

// A paste stands beside its original, so that both can be seen.
const pasteOffsetPx = 36;
const nudgePx = 5;
const pushPx = 20;

/** The site that something is pasted into: the selected one, or that of the selected device. */
export const siteOf = (design: Design, ref: ElementRef | undefined): string | undefined =>
  ref?.collection === 'sites'
    ? ref.id
    : ref?.collection === 'devices'
      ? design.devices[ref.id]?.site
      : undefined;

/** What every command of the sheet does. The same object as long as the design is open. */
export function useCommands(): Commands {
  const open = useOpenDesign();
  const numbering = useNumbering();
  const { settled, sheet } = useDrawn();
  const view = useView();
  const nudge = useNudge();
  const { tidy } = useTidy();
  const choice = useViewChoice();
  const actions = useElementActions();
  const latest = useRef({ settled, sheet, view, nudge, tidy, choice });
  useEffect(() => {
    latest.current = { settled, sheet, view, nudge, tidy, choice };
  });
  return useMemo((): Commands => {
    const say = (text: string): void => void showToast({ tone: 'failed', text });
    const now = (): Design => open.store.getState().document;
    const selection = (): readonly ElementRef[] => open.store.getState().selection;
    const first = (): ElementRef | undefined => selection()[0];
    const travel = (way: 'undo' | 'redo') => (): void => {
      const label = open[way]();
      if (label !== undefined)
        showToast({ tone: 'done', text: `${way === 'undo' ? 'Undone' : 'Done again'}: ${label}` });
    };
    const align = (alignment: Alignment) => (): void => actions.align(selection(), alignment);
    const putDown = (part: TrayPart) => (): void => startPlacing(part);
    const openMenuAt = (refs: readonly ElementRef[], of: 'all' | 'ways'): void => {
      const [ref] = refs;
      if (ref === undefined) return;
      const focused = document.activeElement?.closest('.react-flow__node, .react-flow__edge');
      const anchor = anchorOf(latest.current.settled, ref, now());
      const onScreen = anchor === undefined ? undefined : latest.current.view.onScreen(anchor);
      const box = focused?.getBoundingClientRect();
      const at =
        onScreen ??
        (box === undefined
          ? { x: window.innerWidth / 2, y: window.innerHeight / 3 }
          : { x: box.x + box.width / 2, y: box.y + box.height / 2 });
      openMenu({ at, ref, of });
    };
    const turn = (by: number): void => {
      const { number, of, turnTo } = latest.current.sheet;
      if (of === 1) return say('The design has one sheet.');
      const next = number + by;
      if (next < 1 || next > of) return say(`This is the ${by < 0 ? 'first' : 'last'} sheet of ${of}.`);
      turnTo(next);
    };
    const run: Commands['run'] = {
      find: () => setSearching(true),
      keys: () => setListingKeys(true),
      menu: () => openMenuAt(selection(), 'all'),

      select: () => setTool('select'),
      pan: () => setTool('pan'),
      fit: () => latest.current.view.fit(latest.current.settled.sheet),
      zoomIn: () => latest.current.view.zoomBy(1.25),
      zoomOut: () => latest.current.view.zoomBy(1 / 1.25),
      zoomSelection: () => {
        const { settled, view } = latest.current;
        const ground = around(boxesOf(settled, selection()).map(({ rect }) => rect));
        const anchor = first() === undefined ? undefined : anchorOf(settled, first()!, now());
        if (ground !== undefined) view.fitRect(ground);
        else if (anchor !== undefined)
          view.fitRect({ x: anchor.x - 160, y: anchor.y - 100, width: 320, height: 200 });
        else say('What is selected has no place of its own on the sheet.');
      },
      previousSheet: () => turn(-1),
      nextSheet: () => turn(1),
      inspector: () => setInspecting(!useDesk.getState().inspecting),

      layerCabling: () => latest.current.choice.toggleLayer('cabling'),
      layerUnderlay: () => latest.current.choice.toggleLayer('underlay'),
      layerOverlay: () => latest.current.choice.toggleLayer('overlay'),
      onlySegment: () => {
        const segments = [...new Set(selection().flatMap((ref) => segmentsOf(now(), ref)))];
        if (segments.length > 0) actions.showOnly(segments);
        else
          say('Select a segment, or something that belongs to one: a tunnel, an endpoint, a host, a site.');
      },
      everything: () => latest.current.choice.showEverything(),

      selectAll: () => {
        const document = now();
        open.select(
          (['sites', 'devices', 'transports', 'notes'] as const).flatMap((collection) =>
            Object.keys(document[collection]).map((id): ElementRef => ({ collection, id })),
          ),
        );
      },
      letGo: () => (useDesk.getState().placing === undefined ? open.select([]) : startPlacing(undefined)),
      farEnd: () => {
        const ref = first();
        if (ref === undefined) return;
        const ways = farEnds(now(), ref);
        const [only] = ways;
        if (only === undefined)
          return say(
            `Nothing leads on from ${nameOf(now(), ref)}. Select a tunnel, a cable, a port or an endpoint.`,
          );
        if (ways.length === 1) return actions.follow(only);
        // Of the two ends of a cord the one that is further from where one looks is the far one.
        const joins =
          ref.collection === 'tunnels' || ref.collection === 'associations' || ref.collection === 'links';
        if (!joins) return openMenuAt([ref], 'ways');
        const { settled, view } = latest.current;
        const middle = view.middle();
        const away = (at: ElementRef): number => {
          // What lies on another sheet is the far end, however near its flag.
          const on = sheetsOf(now(), at);
          if (on.length > 0 && !on.includes(latest.current.sheet.number)) return Infinity;
          const anchor = anchorOf(settled, at, now());
          return anchor === undefined ? -1 : Math.hypot(anchor.x - middle.x, anchor.y - middle.y);
        };
        actions.follow(ways.reduce((best, way) => (away(way.at) > away(best.at) ? way : best), only));
      },

      undo: travel('undo'),
      redo: travel('redo'),
      duplicate: () => actions.duplicate(selection()),
      rename: () => {
        const ref = first();
        if (ref !== undefined)
          actions.rename({ ref, member: ref.port === undefined ? ref.member : undefined });
      },
      remove: () => {
        const ref = first();
        if (ref !== undefined) actions.remove({ ref });
      },

      note: putDown('note'),
      noteHere: () => {
        const ref = first();
        if (ref !== undefined) actions.addNote(ref);
      },
      firewall: putDown('firewall'),
      haPair: putDown('ha-pair'),
      router: putDown('router'),
      switch: putDown('switch'),
      host: putDown('host'),
      site: putDown('site'),
      transport: putDown('transport'),
      cable: () => askToJoin({ kind: 'cable' }),
      tunnel: () => askToJoin({ kind: 'tunnel' }),
      association: () => askToJoin({ kind: 'association' }),

      nudgeLeft: () => latest.current.nudge(-nudgePx, 0),
      nudgeRight: () => latest.current.nudge(nudgePx, 0),
      nudgeUp: () => latest.current.nudge(0, -nudgePx),
      nudgeDown: () => latest.current.nudge(0, nudgePx),
      pushLeft: () => latest.current.nudge(-pushPx, 0),
      pushRight: () => latest.current.nudge(pushPx, 0),
      pushUp: () => latest.current.nudge(0, -pushPx),
      pushDown: () => latest.current.nudge(0, pushPx),
      alignLeft: align('left'),
      alignCentre: align('centre'),
      alignRight: align('right'),
      alignTop: align('top'),
      alignMiddle: align('middle'),
      alignBottom: align('bottom'),
      spaceAcross: () => actions.spaceOut(selection(), 'across'),
      spaceDown: () => actions.spaceOut(selection(), 'down'),
      lock: () => {
        const lockable = selection().filter((ref) => canLock(now(), standingOf(latest.current.settled), ref));
        if (lockable.length === 0)
          return say(
            'Only what stands somewhere by itself can be locked: sites, devices, transports, notes.',
          );
        actions.setLocked(lockable, !lockable.every((ref) => isLocked(now(), ref)));
      },
      collapse: () => {
        const sites = [...new Set(selection().flatMap((ref) => siteOf(now(), ref) ?? []))].filter((id) =>
          canCollapse(now(), id),
        );
        if (sites.length === 0) return say('Select a site, or a device in it, to collapse the site.');
        actions.setCollapsed(sites, !sites.every((id) => isCollapsed(now(), id)));
      },
      tidy: () => void latest.current.tidy([]),
      tidySelected: () => {
        const { devices, site } = tidied(selection());
        if (site === undefined && devices.length === 0)
          return say('Select one site, or two devices or more, to tidy them.');
        void latest.current.tidy(selection());
      },
    };
    return {
      run,
      actions,
      paste: (parts) =>
        void actions.run(
          pasteParts(
            now(),
            parts,
            { dx: pasteOffsetPx, dy: pasteOffsetPx },
            siteOf(now(), first()),
            newEntryId,
            numbering,
          ),
        ),
    };
  }, [open, actions, numbering]);
}
