/** One stretch of bytes on the wire. */
export interface Layer {
  readonly id: string;
  readonly name: string;
  readonly bytes: number;
  readonly kind: 'header' | 'payload' | 'trailer';
  readonly note?: string;
}

export const header = (id: string, name: string, bytes: number, note?: string): Layer =>
  note === undefined ? { id, name, bytes, kind: 'header' } : { id, name, bytes, kind: 'header', note };

export const payload = (id: string, name: string, bytes: number): Layer => ({
  id,
  name,
  bytes,
  kind: 'payload',
});

export const trailer = (id: string, name: string, bytes: number, note?: string): Layer =>
  note === undefined ? { id, name, bytes, kind: 'trailer' } : { id, name, bytes, kind: 'trailer', note };

/** Length of consecutive layers together. */
export const bytesOf = (layers: readonly Layer[]): number =>
  layers.reduce((sum, layer) => sum + layer.bytes, 0);
