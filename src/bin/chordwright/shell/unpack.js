// Unpacks raw LZMA data into `size` bytes. The program inside the page is kept compressed, and this works the same in
// every browser and under every scheme, before anything else does.
//
// The data is what an LZMA encoder writes with lc = 4, lp = 0, pb = 0, no header and no end mark (bundle.rs): the literals
// are told apart by the high half of the byte before them, and nothing depends on the place in the output. The names are
// those of the LZMA specification. Every step writes a byte at least and stops where the data or the output ends, so
// damaged data ends in an error, soon. The coder has to come out at zero where the data ends, which after damage it does
// only once in some thousand million times, but for the first few bytes; a program begins with those of every program.
function unpack(data, size) {
  const damaged = () => new Error("the program in this file is damaged");
  const STATES = 12;
  const MATCH_MIN = 2;
  const out = new Uint8Array(size);
  let filled = 0;

  // The range decoder. Its two numbers of 32 bits are kept in an array, where they stay numbers of 32 bits.
  const coder = new Uint32Array(2);
  const RANGE = 0;
  const CODE = 1;
  let at = 0;
  const shift = () => {
    if (at >= data.length) throw damaged();
    coder[RANGE] <<= 8;
    coder[CODE] = (coder[CODE] << 8) | data[at++];
  };
  for (let i = 0; i < 5; i++) shift();
  coder[RANGE] = 0xffffffff;

  // The probability of a zero is of 11 bits, and moves by 1/32 of the way to what came.
  const even = (count) => new Uint16Array(count).fill(1 << 10);
  const bit = (chances, index) => {
    const chance = chances[index];
    const bound = (coder[RANGE] >>> 11) * chance;
    const one = coder[CODE] >= bound;
    if (one) {
      coder[RANGE] -= bound;
      coder[CODE] -= bound;
      chances[index] = chance - (chance >>> 5);
    } else {
      coder[RANGE] = bound;
      chances[index] = chance + ((2048 - chance) >>> 5);
    }
    if (coder[RANGE] < 1 << 24) shift();
    return one ? 1 : 0;
  };
  const direct = (count) => {
    let value = 0;
    for (; count > 0; count--) {
      coder[RANGE] >>>= 1;
      const one = coder[CODE] >= coder[RANGE];
      if (one) coder[CODE] -= coder[RANGE];
      value = value * 2 + (one ? 1 : 0);
      if (coder[RANGE] < 1 << 24) shift();
    }
    return value;
  };
  const tree = (chances, count) => {
    let node = 1;
    for (let i = 0; i < count; i++) node = (node << 1) | bit(chances, node);
    return node - (1 << count);
  };
  const reverseTree = (chances, start, count) => {
    let value = 0;
    for (let i = 0, node = 1; i < count; i++) {
      const its = bit(chances, start + node);
      node = (node << 1) | its;
      value |= its << i;
    }
    return value;
  };

  const lengths = () => ({ choice: even(2), low: even(8), mid: even(8), high: even(256) });
  const length = ({ choice, low, mid, high }) => {
    if (!bit(choice, 0)) return MATCH_MIN + tree(low, 3);
    if (!bit(choice, 1)) return MATCH_MIN + 8 + tree(mid, 3);
    return MATCH_MIN + 16 + tree(high, 8);
  };

  const posSlots = [even(64), even(64), even(64), even(64)];
  const posSpecial = even(128);
  const posAlign = even(16);
  const distance = (itsLength) => {
    const slot = tree(posSlots[Math.min(itsLength - MATCH_MIN, 3)], 6);
    if (slot < 4) return slot;
    const extra = (slot >> 1) - 1;
    const base = (2 | (slot & 1)) * 2 ** extra;
    if (slot < 14) return base + reverseTree(posSpecial, base - slot, extra);
    return base + direct(extra - 4) * 16 + reverseTree(posAlign, 0, 4);
  };

  const literals = even(0x300 << 4);
  const literal = (matched) => {
    const start = 0x300 * (filled > 0 ? out[filled - 1] >> 4 : 0);
    let node = 1;
    // After a match the byte that the match would go on with helps, for as long as the literal agrees with it.
    for (let agrees = matched >= 0; agrees && node < 0x100;) {
      const expected = (matched >> 7) & 1;
      matched <<= 1;
      const its = bit(literals, start + (0x100 << expected) + node);
      node = (node << 1) | its;
      agrees = its === expected;
    }
    while (node < 0x100) node = (node << 1) | bit(literals, start + node);
    out[filled++] = node;
  };
  const copy = (back, count) => {
    if (back >= filled || count > size - filled) throw damaged();
    for (; count > 0; count--, filled++) out[filled] = out[filled - back - 1];
  };

  const isMatch = even(STATES);
  const isRep = even(STATES);
  const isRepG0 = even(STATES);
  const isRepG1 = even(STATES);
  const isRepG2 = even(STATES);
  const isRep0Long = even(STATES);
  const matchLengths = lengths();
  const repLengths = lengths();
  let state = 0;
  let [rep0, rep1, rep2, rep3] = [0, 0, 0, 0];
  while (filled < size) {
    if (!bit(isMatch, state)) {
      literal(state < 7 ? -1 : out[filled - rep0 - 1]);
      state = state < 4 ? 0 : state < 10 ? state - 3 : state - 6;
      continue;
    }
    const afterLiteral = state < 7;
    if (!bit(isRep, state)) {
      const its = length(matchLengths);
      [rep0, rep1, rep2, rep3] = [distance(its), rep0, rep1, rep2];
      copy(rep0, its);
      state = afterLiteral ? 7 : 10;
      continue;
    }
    if (bit(isRepG0, state)) {
      if (!bit(isRepG1, state)) [rep0, rep1] = [rep1, rep0];
      else if (!bit(isRepG2, state)) [rep0, rep1, rep2] = [rep2, rep0, rep1];
      else [rep0, rep1, rep2, rep3] = [rep3, rep0, rep1, rep2];
    } else if (!bit(isRep0Long, state)) {
      copy(rep0, 1);
      state = afterLiteral ? 9 : 11;
      continue;
    }
    copy(rep0, length(repLengths));
    state = afterLiteral ? 8 : 11;
  }
  if (coder[CODE] !== 0 || at !== data.length) throw damaged();
  return out;
}
