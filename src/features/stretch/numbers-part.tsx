import { CellGrid } from '../../components/cell.tsx';
import { CheckCell, CommitCell, NumberCell } from '../../components/field-cells.tsx';
import type { StretchForm } from '../../engine/stretch/stretch-form.ts';
import { FormPart, type FormPartProps, withField } from './form-part.tsx';
import { problemAt } from './problem-words.ts';

type Pools = NonNullable<StretchForm['pools']>;
const lowestVni = 10_001;
const highestVni = 16_777_215;

/** Where numbers come from; the workspace's pools where nothing is said. */
export function NumbersPart({ form, problems, onChange }: FormPartProps) {
  const { pools = {}, domain, sampleHosts, encrypted } = form;
  const setPools = (next: Pools): void =>
    onChange(withField(form, 'pools', Object.keys(next).length === 0 ? undefined : next));
  const vnis = (from: number | undefined, to: number | undefined): Pools =>
    withField(
      pools,
      'vnis',
      from === undefined && to === undefined
        ? undefined
        : { from: from ?? Math.min(lowestVni, to!), to: to ?? highestVni },
    );
  return (
    <FormPart title="Numbers and names">
      <CellGrid columns="minmax(0,1.4fr) minmax(0,1fr) minmax(0,1fr)">
        <CommitCell
          label="Loopbacks from"
          value={pools.loopbacks ?? ''}
          placeholder="the workspace’s pool"
          error={problemAt(problems, 'pools.loopbacks', 'Loopbacks from')}
          onCommit={(text) => setPools(withField(pools, 'loopbacks', text === '' ? undefined : text))}
        />
        <NumberCell
          label="VNIs from"
          value={pools.vnis?.from}
          min={0}
          max={highestVni}
          placeholder="the pool"
          error={problemAt(problems, 'pools.vnis', 'VNIs from')}
          onCommit={(from) => setPools(vnis(from, pools.vnis?.to))}
        />
        <NumberCell
          label="VNIs to"
          value={pools.vnis?.to}
          min={0}
          max={highestVni}
          placeholder="the pool"
          onCommit={(to) => setPools(vnis(pools.vnis?.from, to))}
        />
        {encrypted && (
          <CommitCell
            label="Identities in the domain"
            span={2}
            value={domain ?? ''}
            placeholder="the gateway’s name alone"
            error={problemAt(problems, 'domain', 'Domain')}
            onCommit={(text) => onChange(withField(form, 'domain', text === '' ? undefined : text))}
          />
        )}
        <CheckCell
          label="Sample hosts"
          span={encrypted ? 1 : 3}
          checked={sampleHosts !== false}
          words={['one each', 'none']}
          onChange={(checked) => onChange({ ...form, sampleHosts: checked })}
        />
      </CellGrid>
    </FormPart>
  );
}
