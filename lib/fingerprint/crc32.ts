const TABLE = makeTable();

/**
 * CRC-32 with the reflected polynomial 0xEDB88320.
 *
 * Source:  ISO/IEC/IEEE 8802-3 (Ethernet) frame check sequence; check value of "123456789" is CBF43926
 */
export function crc32(bytes: Uint8Array): number {
  let crc = 0xffffffff;
  for (let i = 0; i < bytes.length; i++) crc = (crc >>> 8) ^ TABLE[(crc ^ bytes[i]!) & 255]!;
  return (crc ^ 0xffffffff) >>> 0;
}

function makeTable(): Uint32Array {
  const table = new Uint32Array(256);
  for (let n = 0; n < 256; n++) {
    let value = n;
    for (let bit = 0; bit < 8; bit++) value = value & 1 ? (value >>> 1) ^ 0xedb88320 : value >>> 1;
    table[n] = value >>> 0;
  }
  return table;
}
