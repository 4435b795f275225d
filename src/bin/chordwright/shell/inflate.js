// Inflates raw deflate data (RFC 1951) into `size` bytes. The program inside the page is kept compressed, and this works
// the same in every browser and under every scheme, before anything else does.
function inflate(data, size) {
  const LENGTH_BASE = [3, 4, 5, 6, 7, 8, 9, 10, 11, 13, 15, 17, 19, 23, 27, 31, 35, 43, 51, 59, 67, 83, 99, 115, 131, 163,
    195, 227, 258];
  const LENGTH_EXTRA = [0, 0, 0, 0, 0, 0, 0, 0, 1, 1, 1, 1, 2, 2, 2, 2, 3, 3, 3, 3, 4, 4, 4, 4, 5, 5, 5, 5, 0];
  const LENGTHS_OF_LENGTHS = [16, 17, 18, 0, 8, 7, 9, 6, 10, 5, 11, 4, 12, 3, 13, 2, 14, 1, 15];
  const out = new Uint8Array(size);
  let filled = 0;
  let at = 0;
  let bits = 0;
  let held = 0;

  const hold = (count) => {
    for (; held < count; held += 8) bits |= data[at++] << held;
  };
  const take = (count) => {
    hold(count);
    const value = bits & ((1 << count) - 1);
    bits >>>= count;
    held -= count;
    return value;
  };

  // A table that the next 15 bits index: the symbol, and in the low 4 bits how long its code is.
  const codes = (lengths) => {
    const table = new Uint16Array(1 << 15);
    for (let length = 1, code = 0; length <= 15; length++, code <<= 1) {
      lengths.forEach((its, symbol) => {
        if (its !== length) return;
        let turned = 0;
        for (let bit = 0; bit < length; bit++) turned |= ((code >> bit) & 1) << (length - 1 - bit);
        for (let index = turned; index < table.length; index += 1 << length) table[index] = (symbol << 4) | length;
        code++;
      });
    }
    return table;
  };
  const symbol = (table) => {
    hold(15);
    const entry = table[bits & 0x7fff];
    take(entry & 15);
    return entry >> 4;
  };

  const fixed = () => {
    const lengths = Array.from({ length: 288 }, (_, s) => (s < 144 ? 8 : s < 256 ? 9 : s < 280 ? 7 : 8));
    return [codes(lengths), codes(Array(30).fill(5))];
  };
  const described = () => {
    const literals = take(5) + 257;
    const distances = take(5) + 1;
    const first = Array(19).fill(0);
    for (let left = take(4) + 4, i = 0; i < left; i++) first[LENGTHS_OF_LENGTHS[i]] = take(3);
    const table = codes(first);
    const lengths = [];
    while (lengths.length < literals + distances) {
      const its = symbol(table);
      if (its < 16) lengths.push(its);
      else if (its === 16) lengths.push(...Array(take(2) + 3).fill(lengths[lengths.length - 1]));
      else lengths.push(...Array(its === 17 ? take(3) + 3 : take(7) + 11).fill(0));
    }
    return [codes(lengths.slice(0, literals)), codes(lengths.slice(literals))];
  };

  const stored = () => {
    take(held & 7);
    const length = take(16);
    take(16);
    for (let i = 0; i < length; i++) out[filled++] = take(8);
  };
  const compressed = ([literals, distances]) => {
    for (let its = symbol(literals); its !== 256; its = symbol(literals)) {
      if (its < 256) {
        out[filled++] = its;
        continue;
      }
      let length = LENGTH_BASE[its - 257] + take(LENGTH_EXTRA[its - 257]);
      const far = symbol(distances);
      const extra = far < 2 ? 0 : (far >> 1) - 1;
      const back = (far < 2 ? far : (2 + (far & 1)) << extra) + 1 + take(extra);
      for (; length > 0; length--, filled++) out[filled] = out[filled - back];
    }
  };

  for (let last = 0; !last;) {
    last = take(1);
    const kind = take(2);
    if (kind === 0) stored();
    else compressed(kind === 1 ? fixed() : described());
  }
  if (filled !== size) throw new Error("the program in this file is damaged");
  return out;
}
