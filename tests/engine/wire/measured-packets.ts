import { readFileSync } from 'node:fs';
import { bareStack, type Esp, type Stack } from '#engine/wire/stack.ts';

type Row = Readonly<Record<string, string>>;

/** Rows of a CSV file of `tests/reference`, by column name; comment lines left out. */
export function measuredRows(fileName: string): readonly Row[] {
  const text = readFileSync(new URL(`../../reference/${fileName}`, import.meta.url), 'utf8');
  const [head = '', ...lines] = text.split(/\r?\n/).filter((line) => line !== '' && !line.startsWith('#'));
  const columns = head.split(',');
  return lines.map((line) => {
    const cells = line.split(',');
    return Object.fromEntries(columns.map((column, place) => [column, cells[place] ?? '']));
  });
}

const suites: Readonly<Record<string, Pick<Exclude<Esp, { mode: 'none' }>, 'transform' | 'integrity'>>> = {
  'AES-GCM-16-128': { transform: 'aes-gcm-16' },
  'AES-CBC-128+HMAC-SHA1-96': { transform: 'aes-cbc', integrity: 'hmac-sha1-96' },
  'AES-CBC-256+HMAC-SHA2-256-128': { transform: 'aes-cbc', integrity: 'hmac-sha2-256-128' },
};

const ipVersion = (text: string | undefined): 'ipv4' | 'ipv6' => {
  if (text === 'IPv4') return 'ipv4';
  if (text === 'IPv6') return 'ipv6';
  throw new Error(`neither IPv4 nor IPv6: ${text}`);
};

const tagCounts: Readonly<Record<string, Stack['innerTags']>> = { none: 0, dot1q: 1, 'dot1ad+dot1q': 2 };

/** The stack that a measured packet was built with. */
export function measuredStack(row: Row): Stack {
  const innerTags = tagCounts[row.inner_tags ?? ''];
  if (innerTags === undefined) throw new Error(`unknown tags: ${row.inner_tags}`);
  return { ...bareStack, vxlanOver: ipVersion(row.vxlan_ip), innerTags, esp: measuredEsp(row) };
}

function measuredEsp(row: Row): Esp {
  if (row.esp_mode === 'none') return { mode: 'none' };
  const suite = suites[row.transform ?? ''];
  if (suite === undefined) throw new Error(`unknown transform: ${row.transform}`);
  return { mode: 'tunnel', ...suite, natTraversal: row.nat_t === '1', outerIp: ipVersion(row.esp_outer_ip) };
}
