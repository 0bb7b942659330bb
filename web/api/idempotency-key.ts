/** A key for one intended action; the same key sent twice has one effect. Works without a secure context, too. */
export const newIdempotencyKey = (): string => {
  const random = crypto.getRandomValues(new Uint8Array(16));
  random[6] = (random[6]! & 0x0f) | 0x40;
  random[8] = (random[8]! & 0x3f) | 0x80;
  const hex = Array.from(random, (byte) => byte.toString(16).padStart(2, '0')).join('');
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join('-');
};
