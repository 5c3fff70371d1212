import { useReactFlow, useStore } from '@xyflow/react';
import type { PointerEvent } from 'react';
import { Button } from '../../components/button.tsx';
import { Glyph } from '../../components/glyph.tsx';
import { Icon } from '../../components/icon.tsx';
import { Tooltip } from '../../components/tooltip.tsx';
import type { GlyphName } from '../../drawing/parts/glyphs.ts';
import { pathData } from '../../drawing/path-geometry.ts';
import { segmentPaint } from '../../drawing/theme/paint.ts';
import type { ViewLayer } from '../../drawing/view-layers.ts';
import { keyWords, type ShortcutId } from '../commands/shortcuts.ts';
import { useDrawn } from '../geometry-context.tsx';
import { useViewChoice } from '../use-view-choice.ts';
import { useView } from '../use-view.ts';

/** The whole sheet in small with what is in view, and the zoom. */
export function ViewControls() {
  const { geometry } = useDrawn();
  const view = useView();
  return (
    <div className="flex flex-col gap-10 border-t border-rule-2 p-12">
      <Layers />
      <Minimap />
      <div role="group" aria-label="Zoom" className="zoom-row">
        <Button
          kind="quiet"
          small
          iconOnly
          aria-label="Zoom out"
          icon={<Icon name="minus" size={14} />}
          onClick={() => view.zoomBy(1 / 1.25)}
        />
        <output aria-label="Zoom now">{Math.round(view.zoom * 100)} %</output>
        <Button
          kind="quiet"
          small
          iconOnly
          aria-label="Zoom in"
          icon={<Icon name="plus" size={14} />}
          onClick={() => view.zoomBy(1.25)}
        />
        <Button kind="quiet" small onClick={() => view.fit(geometry.sheet)}>
          Fit
        </Button>
      </div>
    </div>
  );
}

const layers: readonly (readonly [ViewLayer, string, GlyphName, ShortcutId])[] = [
  ['cabling', 'Cabling', 'cable', 'layerCabling'],
  ['underlay', 'Underlay', 'transport', 'layerUnderlay'],
  ['overlay', 'Overlay', 'tunnel', 'layerOverlay'],
];

function Layers() {
  const { choice, toggleLayer } = useViewChoice();
  return (
    <div role="group" aria-label="Layers" className="layer-row">
      {layers.map(([layer, name, glyph, key]) => {
        const isOn = choice.layers.includes(layer);
        return (
          <Tooltip key={layer} text={`${name} ${isOn ? 'shown' : 'left out'} (${keyWords(key)})`}>
            <button type="button" aria-label={name} aria-pressed={isOn} onClick={() => toggleLayer(layer)}>
              <Glyph name={glyph} size={18} />
            </button>
          </Tooltip>
        );
      })}
    </div>
  );
}

function Minimap() {
  const { geometry, facts } = useDrawn();
  const flow = useReactFlow();
  const [x, y, zoom] = useStore((state) => state.transform);
  const width = useStore((state) => state.width);
  const height = useStore((state) => state.height);
  const { sheet } = geometry;
  const goTo = (event: PointerEvent<SVGSVGElement>): void => {
    if (event.buttons !== 1) return;
    const box = event.currentTarget.getBoundingClientRect();
    const at = {
      x: ((event.clientX - box.left) / box.width) * sheet.width,
      y: ((event.clientY - box.top) / box.height) * sheet.height,
    };
    void flow.setCenter(at.x, at.y, { zoom });
  };
  return (
    <svg
      className="minimap"
      viewBox={`0 0 ${sheet.width} ${sheet.height}`}
      aria-hidden="true"
      onPointerDown={(event) => {
        event.currentTarget.setPointerCapture(event.pointerId);
        goTo(event);
      }}
      onPointerMove={goTo}
    >
      <rect width={sheet.width} height={sheet.height} fill="var(--paper)" />
      {geometry.bands.map((band) =>
        [...band.limbs, ...(band.header === undefined ? [] : [band.header])].map((rect, i) => (
          <rect
            key={`${band.id} ${i}`}
            {...rect}
            fill="var(--band)"
            stroke="var(--band-tick)"
            strokeWidth={6}
          />
        )),
      )}
      {geometry.sites.map((site) => (
        <rect key={site.id} {...site.rect} fill="none" stroke="var(--rule-2)" strokeWidth={6} />
      ))}
      {geometry.jackets.flatMap((jacket) =>
        jacket.lanes.map((lane) => {
          const palette = facts.tunnels[lane.tunnel]?.segments[0]?.palette;
          return (
            <path
              key={`${jacket.id} ${lane.tunnel}`}
              d={pathData(lane.path)}
              fill="none"
              stroke={segmentPaint(palette ?? 'none').core}
              strokeWidth={13}
            />
          );
        }),
      )}
      {geometry.devices.flatMap((device) =>
        device.plates.map((plate) => (
          <rect key={`${device.id} ${plate.member ?? 0}`} {...plate.rect} fill="var(--ink-2)" />
        )),
      )}
      <rect
        className="minimap-view"
        x={-x / zoom}
        y={-y / zoom}
        width={width / zoom}
        height={height / zoom}
        fill="var(--blue)"
        fillOpacity={0.1}
        stroke="var(--blue)"
        strokeWidth={10}
      />
    </svg>
  );
}
