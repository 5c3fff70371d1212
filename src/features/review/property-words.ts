const short: { readonly [word: string]: string } = {
  mtu: 'MTU',
  vni: 'VNI',
  vlan: 'VLAN',
  vlans: 'VLANs',
  ip: 'IP',
  ike: 'IKE',
  esp: 'ESP',
  df: 'DF',
  mac: 'MAC',
  nat: 'NAT',
  bps: '(bit/s)',
  bytes: '(bytes)',
  us: '(µs)',
  ms: '(ms)',
  wan: 'WAN',
  lan: 'LAN',
  a: 'end A',
  b: 'end B',
};

const words = (key: string): string =>
  key
    .replace(/([a-z0-9])([A-Z])/g, '$1 $2')
    .toLowerCase()
    .split(/[\s-]+/)
    .map((word) => short[word] ?? word)
    .join(' ');

/** A property by the keys that lead to it: 'End B, VNI'. */
export const propertyWords = (path: readonly string[]): string => {
  const all = path.map(words).join(', ');
  return all.charAt(0).toUpperCase() + all.slice(1);
};

const mostDeep = 3;

/** The properties of an entry that have a value of their own, with the keys that lead there. */
export const propertiesOf = (
  entry: object,
  at: readonly string[] = [],
): readonly { readonly path: readonly string[]; readonly label: string }[] =>
  Object.entries(entry).flatMap(([key, value]: [string, unknown]) => {
    const path = [...at, key];
    // Ranks say where something stands in a list and mean nothing by themselves.
    if (key === 'rank' || key === 'kind') return [];
    if (typeof value === 'object' && value !== null && !Array.isArray(value))
      return path.length < mostDeep ? propertiesOf(value, path) : [];
    return [{ path, label: propertyWords(path) }];
  });
