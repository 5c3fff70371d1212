import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid, PlainCell } from '../../components/cell.tsx';
import { Icon } from '../../components/icon.tsx';
import { CommitAreaCell, CommitCell, SelectCell } from '../../components/field-cells.tsx';
import type { LandingPlan, SitePlan } from '../../engine/stretch/stretch-form.ts';
import { MOST_SITES } from '../../engine/stretch/stretch-form.ts';
import { nextSite, withNamedSites, withSites } from './first-form.ts';
import { AddButton, FormPart, type FormPartProps, RemoveButton, replaced } from './form-part.tsx';
import { gateways, LandingCells } from './landing-cells.tsx';
import { problemAt } from './problem-words.ts';

/** The sites: what stands there, and how it meets its transports. */
export function SitesPart({ form, problems, onChange }: FormPartProps) {
  const { sites } = form;
  const [several, setSeveral] = useState(false);
  const addNamed = (text: string): void => {
    const names = text
      .split('\n')
      .map((name) => name.trim())
      .filter((name) => name !== '');
    onChange(withNamedSites(form, names, MOST_SITES));
  };
  return (
    <FormPart
      title={`Sites (${sites.length})`}
      beside={
        <span className="flex gap-6">
          <Button small kind="quiet" aria-expanded={several} onClick={() => setSeveral(!several)}>
            Add by names…
          </Button>
          <AddButton
            disabled={sites.length >= MOST_SITES}
            onClick={() => onChange(withSites(form, [...sites, nextSite(form)]))}
          >
            Add a site
          </AddButton>
        </span>
      }
    >
      {several && (
        <CellGrid>
          <CommitAreaCell
            label="Names, one on each line"
            value=""
            rows={4}
            hint="When you leave the cell, sites that have no name yet take the first, and the others are added."
            onCommit={addNamed}
          />
        </CellGrid>
      )}
      {sites.map((site, i) => (
        <SiteRow
          key={site.key}
          {...{ form, problems, site }}
          at={`sites.${i}`}
          onSet={(entry) => onChange({ ...form, sites: replaced(sites, i, entry) })}
          onRemove={
            sites.length > 2
              ? () =>
                  onChange(
                    withSites(
                      form,
                      sites.filter(({ key }) => key !== site.key),
                    ),
                  )
              : undefined
          }
        />
      ))}
    </FormPart>
  );
}

function SiteRow({
  form,
  problems,
  site,
  at,
  onSet,
  onRemove,
}: Pick<FormPartProps, 'form' | 'problems'> & {
  readonly site: SitePlan;
  readonly at: string;
  readonly onSet: (site: SitePlan) => void;
  readonly onRemove: (() => void) | undefined;
}) {
  const { transports } = form;
  const unused = transports.filter(({ key }) => !site.landings.some(({ transport }) => transport === key));
  return (
    <div role="group" aria-label={site.name}>
      <CellGrid columns="minmax(0,1.7fr) minmax(0,1fr) 38px">
        <CommitCell
          label="Site"
          value={site.name}
          error={problemAt(problems, `${at}.name`, 'Site')}
          onCommit={(name) => onSet({ ...site, name })}
        />
        <SelectCell
          label="Gateway"
          value={site.gateway}
          options={gateways}
          onChange={(gateway) => onSet({ ...site, gateway })}
        />
        <PlainCell className="items-center justify-center">
          {onRemove !== undefined && <RemoveButton of={site.name} onClick={onRemove} />}
        </PlainCell>
      </CellGrid>
      {site.landings.map((landing, l) => {
        const set = (entry: LandingPlan): void =>
          onSet({ ...site, landings: replaced(site.landings, l, entry) });
        const name = transports.find(({ key }) => key === landing.transport)?.name ?? landing.transport;
        const isMore = l === site.landings.length - 1 && unused.length > 0;
        return (
          <CellGrid
            key={landing.transport}
            columns="minmax(0,1.2fr) minmax(0,1.1fr) minmax(0,1.1fr) 38px"
            className="-mt-px"
          >
            <LandingCells
              landing={landing}
              place={site.name}
              transports={[landing.transport, ...unused.map(({ key }) => key)].map((key) => ({
                value: key,
                label: transports.find((each) => each.key === key)?.name ?? key,
              }))}
              error={problemAt(problems, `${at}.landings`, 'Lands on')}
              addressError={problemAt(problems, `${at}.landings.${l}.address`, 'Outside address')}
              onChange={set}
            />
            <PlainCell className="items-center justify-center">
              {isMore ? (
                <AddIcon
                  of={site.name}
                  onClick={() =>
                    onSet({ ...site, landings: [...site.landings, { transport: unused[0]!.key }] })
                  }
                />
              ) : (
                site.landings.length > 1 && (
                  <RemoveButton
                    of={`${name} at ${site.name}`}
                    onClick={() =>
                      onSet({ ...site, landings: site.landings.filter((_, each) => each !== l) })
                    }
                  />
                )
              )}
            </PlainCell>
          </CellGrid>
        );
      })}
    </div>
  );
}

function AddIcon({ of, onClick }: { readonly of: string; readonly onClick: () => void }) {
  return (
    <Button
      kind="quiet"
      small
      iconOnly
      aria-label={`Land ${of} on another transport, too`}
      icon={<Icon name="plus" size={13} />}
      onClick={onClick}
    />
  );
}
