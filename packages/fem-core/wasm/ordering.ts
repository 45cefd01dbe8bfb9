/**
 * Approximate minimum degree. The plain twin in src/sparse/minimum-degree.ts takes the same steps in the same order and tells
 * what they are and what the words of a record mean. Arguments count 32-bit words from address 0, where the n records
 * stand.
 */

/** Bytes of a record, as a shift, and of its words. */
const RECORD: usize = 5;
const LIST: usize = 0;
const LENGTH: usize = 4;
const ELEMENTS: usize = 8;
const WEIGHT: usize = 12;
const DEGREE: usize = 16;
const NEXT: usize = 20;
const PREVIOUS: usize = 24;
const MARK: usize = 28;

const BUCKETS: i32 = 1024;
const LAST_STAMP: i32 = 1 << 30;

let heads: usize = 0;
let bucketsAt: usize = 0;
let listsAt: i32 = 0;
let listsEnd: i32 = 0;
let free: i32 = 0;
let stamp: i32 = 0;
let eliminated: i32 = 0;
let lowest: i32 = 0;
let widest: i32 = 0;

/** Address of the record of node i. */
function record(i: i32): usize {
  return (<usize>i) << RECORD;
}

/** Address of a word. */
function word(p: i32): usize {
  return (<usize>p) << 2;
}

export function minimumDegree(n: i32, head: i32, buckets: i32, lists: i32, end: i32, dense: i32): void {
  heads = word(head);
  bucketsAt = word(buckets);
  listsAt = lists;
  listsEnd = end;
  free = 0;
  stamp = 2;
  eliminated = 0;
  lowest = 0;
  widest = 0;
  layOut(n);
  const left = begin(n, dense);
  while (eliminated < left) {
    const pivot = takeLowest();
    const own = record(pivot);
    const place = eliminated;
    eliminated += load<i32>(own, WEIGHT);
    formElement(own, n);
    measureElements(own);
    pruneFront(own, pivot, n);
    mergeTwins(own);
    listFront(own, n);
    store<i32>(own, -1, NEXT);
    store<i32>(own, place, PREVIOUS);
  }
  numberAll(n);
}

/** The pattern stands at the end of the words. */
function layOut(n: i32): void {
  const start = word(listsEnd) - word(n + 1);
  const row = start - word(load<i32>(start + word(n)));
  for (let j = 0; j < n; j++) {
    const from = row + word(load<i32>(start + word(j))) + 4;
    const to = row + word(load<i32>(start + word(j + 1)));
    store<i32>(record(j), load<i32>(record(j), LENGTH) + <i32>((to - from) >> 2), LENGTH);
    for (let p = from; p < to; p += 4) {
      const i = record(load<i32>(p));
      store<i32>(i, load<i32>(i, LENGTH) + 1, LENGTH);
    }
  }
  let at = listsAt;
  for (let j = 0; j < n; j++) {
    store<i32>(record(j), at, LIST);
    store<i32>(record(j), at, NEXT);
    at += load<i32>(record(j), LENGTH);
  }
  for (let j = 0; j < n; j++) {
    let own = word(load<i32>(record(j), NEXT));
    const to = row + word(load<i32>(start + word(j + 1)));
    for (let p = row + word(load<i32>(start + word(j))) + 4; p < to; p += 4) {
      const i = load<i32>(p);
      store<i32>(own, i);
      own += 4;
      const next = load<i32>(record(i), NEXT);
      store<i32>(word(next), j);
      store<i32>(record(i), next + 1, NEXT);
    }
    store<i32>(record(j), <i32>(own >> 2), NEXT);
  }
}

function begin(n: i32, dense: i32): i32 {
  memory.fill(heads, 255, word(listsAt) - heads);
  let left = n;
  for (let i = n - 1; i >= 0; i--) {
    const at = record(i);
    const length = load<i32>(at, LENGTH);
    free = max(free, load<i32>(at, LIST) + length);
    store<i32>(at, 0, ELEMENTS);
    store<i32>(at, length, DEGREE);
    store<i32>(at, 1, MARK);
    if (length > dense) {
      store<i32>(at, 0, WEIGHT);
      store<i32>(at, 0, LENGTH);
      store<i32>(at, -1, NEXT);
      store<i32>(at, --left, PREVIOUS);
    } else {
      store<i32>(at, 1, WEIGHT);
      enlist(i, length);
    }
  }
  return left;
}

function enlist(i: i32, degree: i32): void {
  const at = record(i);
  const head = heads + word(degree);
  const old = load<i32>(head);
  store<i32>(at, old, NEXT);
  store<i32>(at, -1, PREVIOUS);
  if (old >= 0) store<i32>(record(old), i, PREVIOUS);
  store<i32>(head, i);
}

function unlist(at: usize): void {
  const next = load<i32>(at, NEXT);
  const previous = load<i32>(at, PREVIOUS);
  if (next >= 0) store<i32>(record(next), previous, PREVIOUS);
  if (previous >= 0) store<i32>(record(previous), next, NEXT);
  else store<i32>(heads + word(load<i32>(at, DEGREE)), next);
}

function takeLowest(): i32 {
  let head = heads + word(lowest);
  while (load<i32>(head) < 0) head += 4;
  lowest = <i32>((head - heads) >> 2);
  const pivot = load<i32>(head);
  unlist(record(pivot));
  return pivot;
}

function formElement(own: usize, n: i32): void {
  const elements = load<i32>(own, ELEMENTS);
  if (elements !== 0 && free + load<i32>(own, DEGREE) > listsEnd) compress(n);
  store<i32>(own, 0, WEIGHT);
  const from = load<i32>(own, LIST);
  const variables = word(from + elements);
  const to = word(from + load<i32>(own, LENGTH));
  const first = elements === 0 ? from : free;
  let at = word(first);
  let weight = 0;
  // The last list is the pivot's own, of variables.
  for (let q = word(from); q <= variables; q += 4) {
    let p = variables;
    let end = to;
    if (q < variables) {
      const e = record(load<i32>(q));
      if (load<i32>(e, MARK) === 0) continue;
      p = word(load<i32>(e, LIST));
      end = p + word(load<i32>(e, LENGTH));
      store<i32>(e, 0, MARK);
      store<i32>(e, 0, LENGTH);
    }
    for (; p < end; p += 4) {
      const i = load<i32>(p);
      const variable = record(i);
      const w = load<i32>(variable, WEIGHT);
      if (w <= 0) continue;
      store<i32>(variable, -w, WEIGHT);
      weight += w;
      store<i32>(at, i);
      at += 4;
      unlist(variable);
    }
  }
  const end = <i32>(at >> 2);
  if (elements !== 0) free = end;
  store<i32>(own, first, LIST);
  store<i32>(own, end - first, LENGTH);
  store<i32>(own, weight, DEGREE);
  store<i32>(own, 1, MARK);
  widest = max(widest, weight);
}

function compress(n: i32): void {
  for (let i = 0; i < n; i++) {
    const at = record(i);
    if (load<i32>(at, LENGTH) === 0) continue;
    const first = word(load<i32>(at, LIST));
    store<i32>(at, load<i32>(first), LIST);
    store<i32>(first, -1 - i);
  }
  let to = word(listsAt);
  const end = word(free);
  for (let p = to; p < end; ) {
    const sign = load<i32>(p);
    p += 4;
    if (sign >= 0) continue;
    const at = record(-1 - sign);
    store<i32>(to, load<i32>(at, LIST));
    store<i32>(at, <i32>(to >> 2), LIST);
    to += 4;
    for (let k = load<i32>(at, LENGTH) - 1; k > 0; k--) {
      store<i32>(to, load<i32>(p));
      to += 4;
      p += 4;
    }
  }
  free = <i32>(to >> 2);
}

function measureElements(own: usize): void {
  const now = stamp;
  const first = word(load<i32>(own, LIST));
  const end = first + word(load<i32>(own, LENGTH));
  for (let q = first; q < end; q += 4) {
    const at = record(load<i32>(q));
    const weight = load<i32>(at, WEIGHT);
    const from = word(load<i32>(at, LIST));
    const to = from + word(load<i32>(at, ELEMENTS));
    for (let p = from; p < to; p += 4) {
      const e = record(load<i32>(p));
      const mark = load<i32>(e, MARK);
      if (mark >= now) store<i32>(e, mark + weight, MARK);
      else if (mark !== 0) store<i32>(e, load<i32>(e, DEGREE) + now + weight, MARK);
    }
  }
}

function pruneFront(own: usize, pivot: i32, n: i32): void {
  const now = stamp;
  const first = word(load<i32>(own, LIST));
  const end = first + word(load<i32>(own, LENGTH));
  let lost = 0;
  for (let q = first; q < end; q += 4) {
    const i = load<i32>(q);
    const at = record(i);
    const from = word(load<i32>(at, LIST));
    const variables = from + word(load<i32>(at, ELEMENTS));
    const to = from + word(load<i32>(at, LENGTH));
    let kept = from;
    let beyond = 0;
    let hash = 0;
    for (let p = from; p < variables; p += 4) {
      const e = load<i32>(p);
      const element = record(e);
      const mark = load<i32>(element, MARK);
      if (mark > now) {
        beyond += mark - now;
        store<i32>(kept, e);
        kept += 4;
        hash += e;
      } else if (mark !== 0) {
        store<i32>(element, 0, MARK);
        store<i32>(element, 0, LENGTH);
      }
    }
    const elements = kept;
    for (let p = variables; p < to; p += 4) {
      const j = load<i32>(p);
      const weight = load<i32>(record(j), WEIGHT);
      if (weight <= 0) continue;
      beyond += weight;
      store<i32>(kept, j);
      kept += 4;
      hash += j;
    }
    if (beyond === 0) {
      lost -= load<i32>(at, WEIGHT);
      store<i32>(at, 0, WEIGHT);
      store<i32>(at, 0, LENGTH);
      store<i32>(at, pivot, NEXT);
      continue;
    }
    store<i32>(kept, load<i32>(elements));
    store<i32>(elements, load<i32>(from));
    store<i32>(from, pivot);
    store<i32>(at, <i32>((elements - from) >> 2) + 1, ELEMENTS);
    store<i32>(at, <i32>((kept - from) >> 2) + 1, LENGTH);
    store<i32>(at, min(load<i32>(at, DEGREE), beyond), DEGREE);
    const bucket = bucketsAt + word(hash & (BUCKETS - 1));
    store<i32>(at, hash, PREVIOUS);
    store<i32>(at, load<i32>(bucket), NEXT);
    store<i32>(bucket, i);
  }
  store<i32>(own, load<i32>(own, DEGREE) - lost, DEGREE);
  eliminated += lost;
  stamp = now + widest + 1;
  if (stamp > LAST_STAMP) {
    for (let i = 0; i < n; i++) if (load<i32>(record(i), MARK) !== 0) store<i32>(record(i), 1, MARK);
    stamp = 2;
  }
}

function mergeTwins(own: usize): void {
  const first = word(load<i32>(own, LIST));
  const end = first + word(load<i32>(own, LENGTH));
  for (let q = first; q < end; q += 4) {
    const at = record(load<i32>(q));
    if (load<i32>(at, WEIGHT) === 0) continue;
    const bucket = bucketsAt + word(load<i32>(at, PREVIOUS) & (BUCKETS - 1));
    let i = load<i32>(bucket);
    store<i32>(bucket, -1);
    while (i >= 0 && load<i32>(record(i), NEXT) >= 0) {
      mergeInto(i, stamp);
      stamp++;
      i = load<i32>(record(i), NEXT);
    }
  }
}

function mergeInto(i: i32, now: i32): void {
  const at = record(i);
  const length = load<i32>(at, LENGTH);
  const elements = load<i32>(at, ELEMENTS);
  const hash = load<i32>(at, PREVIOUS);
  const from = word(load<i32>(at, LIST));
  const to = from + word(length);
  for (let p = from + 4; p < to; p += 4) store<i32>(record(load<i32>(p)), now, MARK);
  let before = at;
  for (let j = load<i32>(at, NEXT); j >= 0; ) {
    const other = record(j);
    const next = load<i32>(other, NEXT);
    if (
      load<i32>(other, PREVIOUS) === hash &&
      load<i32>(other, LENGTH) === length &&
      load<i32>(other, ELEMENTS) === elements &&
      marked(word(load<i32>(other, LIST)), length, now)
    ) {
      store<i32>(at, load<i32>(at, WEIGHT) + load<i32>(other, WEIGHT), WEIGHT);
      store<i32>(other, 0, WEIGHT);
      store<i32>(other, 0, LENGTH);
      store<i32>(other, i, NEXT);
      store<i32>(before, next, NEXT);
    } else before = other;
    j = next;
  }
}

/** Whether all of a list but its first bear the stamp. */
function marked(list: usize, length: i32, now: i32): bool {
  const end = list + word(length);
  for (let p = list + 4; p < end; p += 4) if (load<i32>(record(load<i32>(p)), MARK) !== now) return false;
  return true;
}

function listFront(own: usize, n: i32): void {
  const first = load<i32>(own, LIST);
  const end = first + load<i32>(own, LENGTH);
  const weight = load<i32>(own, DEGREE);
  const left = n - eliminated;
  let kept = word(first);
  for (let q = kept; q < word(end); q += 4) {
    const i = load<i32>(q);
    const at = record(i);
    const mine = -load<i32>(at, WEIGHT);
    if (mine === 0) continue;
    store<i32>(at, mine, WEIGHT);
    const degree = min(load<i32>(at, DEGREE) + weight, left) - mine;
    store<i32>(at, degree, DEGREE);
    enlist(i, degree);
    lowest = min(lowest, degree);
    store<i32>(kept, i);
    kept += 4;
  }
  const last = <i32>(kept >> 2);
  store<i32>(own, last - first, LENGTH);
  if (last === first) store<i32>(own, 0, MARK);
  if (end === free) free = last;
}

function numberAll(n: i32): void {
  for (let i = 0; i < n; i++) {
    let root = i;
    while (load<i32>(record(root), NEXT) >= 0) root = load<i32>(record(root), NEXT);
    for (let k = i; k !== root; ) {
      const next = load<i32>(record(k), NEXT);
      store<i32>(record(k), root, NEXT);
      k = next;
    }
    const place = load<i32>(record(root), PREVIOUS);
    store<i32>(record(root), place + 1, PREVIOUS);
    store<i32>(heads + word(place), i);
  }
}

/*
 * Nested dissection. The plain twin in src/sparse/dissection-steps.ts takes the same steps and tells what they are; the places
 * of the arrays stand in the first words, in the order of its list PLACES.
 */

const FROM: usize = 0;
const TO: usize = 4;
const NODE: usize = 8;
const MATE: usize = 12;
const SEEN: usize = 16;
const BEFORE: usize = 20;

const LEFT: i32 = -1;
const RIGHT: i32 = -2;
const KEPT: i32 = 0x7fffffff;
const SMALLEST_SHARE: f64 = 0.2;

let points: usize = 0;
let ends: usize = 0;
let startAt: usize = 0;
let rowAt: usize = 0;
let corners: usize = 0;
let numberOf: usize = 0;
let nodeOf: usize = 0;
let order: usize = 0;
let keys: usize = 0;
let spare: usize = 0;
let counts: usize = 0;
let records: usize = 0;
let byX: usize = 0;
let byY: usize = 0;
let ranks: usize = 0;
let parentAt: usize = 0;
let lastAt: usize = 0;
let rankAt: usize = 0;
let nextAt: usize = 0;
let lineA: usize = 0;
let lineB: usize = 0;
let lineC: usize = 0;
let lineD: usize = 0;
let nodes: i32 = 0;
let searches: i32 = 0;
let bestCost: f64 = 0;
let bestAxis: i32 = 0;
let bestAt: i32 = 0;

export function dissect(n: i32): i32 {
  const hasEnds = load<i32>(4) >= 0;
  points = word(load<i32>(0));
  ends = word(load<i32>(4));
  startAt = word(load<i32>(8));
  rowAt = word(load<i32>(12));
  corners = word(load<i32>(16));
  numberOf = word(load<i32>(20));
  nodeOf = word(load<i32>(24));
  order = word(load<i32>(28));
  keys = word(load<i32>(32));
  spare = word(load<i32>(36));
  counts = word(load<i32>(40));
  records = word(load<i32>(44));
  byX = word(load<i32>(48));
  byY = word(load<i32>(52));
  ranks = word(load<i32>(56));
  lineA = word(load<i32>(60));
  parentAt = word(load<i32>(64));
  lastAt = word(load<i32>(68));
  rankAt = word(load<i32>(72));
  nextAt = word(load<i32>(76));
  const m = findCorners(n, hasEnds);
  linkCorners(m, load<i32>(80));
  sortAlong(m, 8, corners, byY);
  cutAll(m);
  findLast();
  placeAll(n, m);
  orderAll(n);
  return nodes;
}

/** Address of the record of a corner. */
function corner(c: i32): usize {
  return records + record(c);
}

function findCorners(n: i32, hasEnds: bool): i32 {
  let m = 0;
  for (let i = 0; i < n; i++) {
    store<i32>(numberOf + word(i), -1);
    const own = ends + (word(i) << 1);
    if (!hasEnds || (load<i32>(own) === i && load<i32>(own, 4) === i)) store<i32>(order + word(m++), i);
  }
  sortAlong(m, 0, order, byX);
  for (let c = 0; c < m; c++) {
    const at = byX + word(c);
    const i = load<i32>(order + word(load<i32>(at)));
    store<i32>(corners + word(c), i);
    store<i32>(numberOf + word(i), c);
    store<i32>(at, c);
  }
  return m;
}

/** `axis`: 0, or 8 for y. */
function sortAlong(m: i32, axis: usize, list: usize, sorted: usize): void {
  let low = Infinity;
  let high = -Infinity;
  for (let c = 0; c < m; c++) {
    const x = load<f64>(points + axis + ((<usize>load<i32>(list + word(c))) << 4));
    if (x < low) low = x;
    if (x > high) high = x;
  }
  const scale = high > low ? 4294967295.0 / (high - low) : 0.0;
  for (let c = 0; c < m; c++) {
    const key = (load<f64>(points + axis + ((<usize>load<i32>(list + word(c))) << 4)) - low) * scale;
    store<u32>(keys + word(c), key > 0.0 && key <= 4294967295.0 ? <u32>key : 0);
    store<i32>(spare + word(c), c);
  }
  let from = spare;
  let to = sorted;
  for (let shift: u32 = 0; shift < 33; shift += 11) {
    memory.fill(counts, 0, 8192);
    for (let c = 0; c < m; c++) add(counts, (load<u32>(keys + word(c)) >> shift) & 2047, 1);
    for (let b = 0, at = 0; b < 2048; b++) {
      const many = load<i32>(counts + word(b));
      store<i32>(counts + word(b), at);
      at += many;
    }
    for (let k = 0; k < m; k++) {
      const c = load<i32>(from + word(k));
      const count = counts + word((load<u32>(keys + word(c)) >> shift) & 2047);
      const at = load<i32>(count);
      store<i32>(count, at + 1);
      store<i32>(to + word(at), c);
    }
    const last = from;
    from = to;
    to = last;
  }
}

function linkCorners(m: i32, lists: i32): void {
  for (let c = 0; c < m; c++) store<i32>(corner(c), 0, TO);
  for (let c = 0; c < m; c++) {
    const column = startAt + word(load<i32>(corners + word(c)));
    const end = rowAt + word(load<i32>(column, 4));
    for (let p = rowAt + word(load<i32>(column)) + 4; p < end; p += 4) {
      const other = load<i32>(numberOf + word(load<i32>(p)));
      if (other < 0) continue;
      store<i32>(corner(c), load<i32>(corner(c), TO) + 1, TO);
      store<i32>(corner(other), load<i32>(corner(other), TO) + 1, TO);
    }
  }
  let at = lists;
  for (let c = 0; c < m; c++) {
    const count = load<i32>(corner(c), TO);
    store<i32>(corner(c), at, FROM);
    store<i32>(corner(c), at, TO);
    at += count;
  }
  for (let c = 0; c < m; c++) {
    const column = startAt + word(load<i32>(corners + word(c)));
    const end = rowAt + word(load<i32>(column, 4));
    for (let p = rowAt + word(load<i32>(column)) + 4; p < end; p += 4) {
      const other = load<i32>(numberOf + word(load<i32>(p)));
      if (other < 0) continue;
      link(c, other);
      link(other, c);
    }
  }
}

/** Appends a link to the list of corner c. */
function link(c: i32, other: i32): void {
  const at = load<i32>(corner(c), TO);
  store<i32>(word(at), other);
  store<i32>(corner(c), at + 1, TO);
}

function cutAll(m: i32): void {
  lineB = lineA + word(m + 2);
  lineC = lineB + word(m + 2);
  lineD = lineC + word(m + 2);
  nodes = 0;
  searches = 0;
  for (let k = 0; k < m; k++) {
    store<i32>(rankOf(load<i32>(byX + word(k))), k);
    store<i32>(rankOf(load<i32>(byY + word(k))), k, 4);
  }
  dissectDomain(0, m, -1);
}

/** The list sorted along the axis of the best cut. */
function bestList(): usize {
  return bestAxis === 0 ? byX : byY;
}

/** Address of the rank of a corner along x; that along y is the next word. */
function rankOf(i: i32): usize {
  return ranks + ((<usize>i) << 3);
}

/** Rank of a corner along the axis of the best cut. */
function bestRank(i: i32): i32 {
  return load<i32>(rankOf(i) + ((<usize>bestAxis) << 2));
}

function dissectDomain(lo: i32, hi: i32, parent: i32): void {
  const node = nodes++;
  store<i32>(parentAt + word(node), parent);
  if (hi - lo <= 1) {
    for (let k = lo; k < hi; k++) store<i32>(corner(load<i32>(byX + word(k))), node, NODE);
    return;
  }
  bestCost = Infinity;
  measureCuts(lo, hi);
  chooseCut(0, lo, hi);
  chooseCut(1, lo, hi);
  const boundary = matchAcross(lo, hi);
  coverCut(hi, boundary, node);
  const middle = lo + partition(0, lo, hi);
  partition(4, lo, hi);
  let end = middle;
  while (end < hi && load<i32>(corner(load<i32>(byX + word(end))), NODE) === RIGHT) end++;
  if (middle > lo) dissectDomain(lo, middle, node);
  if (end > middle) dissectDomain(middle, end, node);
}

function add(line: usize, k: i32, value: i32): void {
  const at = line + word(k);
  store<i32>(at, load<i32>(at) + value);
}

function measureCuts(lo: i32, hi: i32): void {
  const size = hi - lo;
  const bytes = word(size + 2);
  memory.fill(lineA, 0, bytes);
  memory.fill(lineB, 0, bytes);
  memory.fill(lineC, 0, bytes);
  memory.fill(lineD, 0, bytes);
  for (let k = 0; k < size; k++) {
    const i = load<i32>(byX + word(lo + k));
    const v = corner(i);
    const ky = load<i32>(rankOf(i), 4) - lo;
    let xLow = k;
    let xHigh = k;
    let yLow = ky;
    let yHigh = ky;
    const to = word(load<i32>(v, TO));
    for (let p = word(load<i32>(v, FROM)); p < to; p += 4) {
      const at = rankOf(load<i32>(p));
      const x = load<i32>(at) - lo;
      if (<u32>x >= <u32>size) continue;
      const y = load<i32>(at, 4) - lo;
      xLow = min(xLow, x);
      xHigh = max(xHigh, x);
      yLow = min(yLow, y);
      yHigh = max(yHigh, y);
    }
    add(lineA, k + 1, 1);
    add(lineA, xHigh + 1, -1);
    add(lineB, xLow + 1, 1);
    add(lineB, k + 1, -1);
    add(lineC, ky + 1, 1);
    add(lineC, yHigh + 1, -1);
    add(lineD, yLow + 1, 1);
    add(lineD, ky + 1, -1);
  }
}

function chooseCut(axis: i32, lo: i32, hi: i32): void {
  const size = hi - lo;
  const left = axis === 0 ? lineA : lineC;
  const right = axis === 0 ? lineB : lineD;
  const least = max(1, <i32>Math.floor(SMALLEST_SHARE * <f64>size));
  let l = 0;
  let r = 0;
  for (let k = 1; k <= size - least; k++) {
    l += load<i32>(left + word(k));
    r += load<i32>(right + word(k));
    if (k < least) continue;
    const s = <f64>(2 * min(l, r) + 1);
    const cost = (s * s) / <f64>min(k, size - k);
    if (cost < bestCost) {
      bestCost = cost;
      bestAxis = axis;
      bestAt = lo + k;
    }
  }
}

function matchAcross(lo: i32, hi: i32): i32 {
  const list = bestList();
  const at = bestAt;
  for (let k = lo; k < hi; k++) {
    const v = corner(load<i32>(list + word(k)));
    store<i32>(v, k < at ? LEFT : RIGHT, NODE);
    store<i32>(v, -1, MATE);
    store<i32>(v, -1, SEEN);
  }
  let count = 0;
  for (let k = lo; k < at; k++) {
    const i = load<i32>(list + word(k));
    const v = corner(i);
    let across = false;
    const to = word(load<i32>(v, TO));
    for (let p = word(load<i32>(v, FROM)); p < to; p += 4) {
      const j = load<i32>(p);
      const other = corner(j);
      const r = bestRank(j);
      if (r < at || r >= hi) continue;
      across = true;
      if (load<i32>(other, MATE) >= 0) continue;
      store<i32>(other, i, MATE);
      store<i32>(v, j, MATE);
      break;
    }
    if (across) store<i32>(lineA + word(count++), i);
  }
  return count;
}

function coverCut(hi: i32, count: i32, node: i32): void {
  for (let b = 0; b < count; b++) {
    const root = load<i32>(lineA + word(b));
    if (load<i32>(corner(root), MATE) < 0) completeFrom(root, hi);
  }
  for (let b = 0; b < count; b++) {
    const v = corner(load<i32>(lineA + word(b)));
    const mate = load<i32>(v, MATE);
    if (mate < 0) continue;
    if (load<i32>(v, SEEN) === KEPT) store<i32>(corner(mate), node, NODE);
    else store<i32>(v, node, NODE);
  }
}

function completeFrom(root: i32, hi: i32): void {
  const at = bestAt;
  const search = searches++;
  let tail = lineB;
  store<i32>(tail, root);
  tail += 4;
  for (let q = lineB; q < tail; q += 4) {
    const i = load<i32>(q);
    const v = corner(i);
    const to = word(load<i32>(v, TO));
    for (let p = word(load<i32>(v, FROM)); p < to; p += 4) {
      const j = load<i32>(p);
      const other = corner(j);
      const r = bestRank(j);
      if (r < at || r >= hi) continue;
      const seen = load<i32>(other, SEEN);
      if (seen === search || seen === KEPT) continue;
      store<i32>(other, search, SEEN);
      store<i32>(other, i, BEFORE);
      const mate = load<i32>(other, MATE);
      if (mate < 0) {
        swapPath(j);
        return;
      }
      store<i32>(tail, mate);
      tail += 4;
    }
  }
  for (let q = lineB; q < tail; q += 4) {
    const v = corner(load<i32>(q));
    store<i32>(v, KEPT, SEEN);
    const mate = load<i32>(v, MATE);
    if (mate >= 0) store<i32>(corner(mate), KEPT, SEEN);
  }
}

function swapPath(free: i32): void {
  for (let j = free; j >= 0; ) {
    const i = load<i32>(corner(j), BEFORE);
    const next = load<i32>(corner(i), MATE);
    store<i32>(corner(i), j, MATE);
    store<i32>(corner(j), i, MATE);
    j = next;
  }
}

/** `axis`: 0, or 4 for y. */
function partition(axis: usize, lo: i32, hi: i32): i32 {
  const list = axis === 0 ? byX : byY;
  let to = lo;
  let rights = lineA;
  let separator = lineB;
  for (let k = lo; k < hi; k++) {
    const i = load<i32>(list + word(k));
    const side = load<i32>(corner(i), NODE);
    if (side === LEFT) {
      store<i32>(list + word(to), i);
      store<i32>(rankOf(i) + axis, to++);
    } else if (side === RIGHT) {
      store<i32>(rights, i);
      rights += 4;
    } else {
      store<i32>(separator, i);
      separator += 4;
    }
  }
  const left = to - lo;
  to = append(list, axis, to, lineA, rights);
  append(list, axis, to, lineB, separator);
  return left;
}

/** Puts the corners of a line into a sorted list from place `to` on; returns the place after. */
function append(list: usize, axis: usize, to: i32, from: usize, end: usize): i32 {
  for (let q = from; q < end; q += 4) {
    const i = load<i32>(q);
    store<i32>(list + word(to), i);
    store<i32>(rankOf(i) + axis, to++);
  }
  return to;
}

function findLast(): void {
  for (let t = 0; t < nodes; t++) store<i32>(lastAt + word(t), t);
  for (let t = nodes - 1; t > 0; t--) {
    const above = lastAt + word(load<i32>(parentAt + word(t)));
    store<i32>(above, max(load<i32>(above), load<i32>(lastAt + word(t))));
  }
}

function placeAll(n: i32, m: i32): void {
  memory.fill(nodeOf, 0, word(n));
  for (let c = 0; c < m; c++) store<i32>(nodeOf + word(load<i32>(corners + word(c))), load<i32>(corner(c), NODE));
  for (let c = 0; c < m; c++) {
    const j = load<i32>(corners + word(c));
    const node = load<i32>(nodeOf + word(j));
    const column = startAt + word(j);
    const end = rowAt + word(load<i32>(column, 4));
    for (let p = rowAt + word(load<i32>(column)) + 4; p < end; p += 4) {
      const i = load<i32>(p);
      const at = load<i32>(nodeOf + word(i));
      if (at !== node && load<i32>(numberOf + word(i)) < 0) store<i32>(nodeOf + word(i), meet(at, node));
    }
  }
  for (let j = n - 1; j >= 0; j--) {
    if (load<i32>(numberOf + word(j)) >= 0) continue;
    let node = load<i32>(nodeOf + word(j));
    const column = startAt + word(j);
    const end = rowAt + word(load<i32>(column, 4));
    for (let p = rowAt + word(load<i32>(column)) + 4; p < end; p += 4) {
      const other = load<i32>(nodeOf + word(load<i32>(p)));
      if (node !== other) node = meet(node, other);
    }
    store<i32>(nodeOf + word(j), node < 0 ? ~node : node);
  }
}

function meet(node: i32, other: i32): i32 {
  const at = node < 0 ? ~node : node;
  if (other > at) {
    if (other <= load<i32>(lastAt + word(at))) return node < 0 ? node : other;
  } else if (at <= load<i32>(lastAt + word(other))) return node;
  let above = load<i32>(parentAt + word(at));
  while (other < above || other > load<i32>(lastAt + word(above))) above = load<i32>(parentAt + word(above));
  return ~above;
}

function orderAll(n: i32): void {
  store<i32>(rankAt, 0);
  for (let t = 1; t < nodes; t++) {
    store<i32>(rankAt + word(t), load<i32>(rankAt + word(load<i32>(parentAt + word(t)))) + 1);
  }
  for (let t = 0; t < nodes; t++) {
    store<i32>(rankAt + word(t), load<i32>(lastAt + word(t)) - load<i32>(rankAt + word(t)));
  }
  memory.fill(nextAt, 0, word(nodes + 1));
  for (let i = 0; i < n; i++) add(nextAt, rankOfUnknown(i) + 1, 1);
  for (let k = 0; k < nodes; k++) add(nextAt, k + 1, load<i32>(nextAt + word(k)));
  for (let i = 0; i < n; i++) if (load<i32>(numberOf + word(i)) < 0) putNext(i);
  for (let i = 0; i < n; i++) if (load<i32>(numberOf + word(i)) >= 0) putNext(i);
}

function rankOfUnknown(i: i32): i32 {
  return load<i32>(rankAt + word(load<i32>(nodeOf + word(i))));
}

function putNext(i: i32): void {
  const next = nextAt + word(rankOfUnknown(i));
  const at = load<i32>(next);
  store<i32>(order + word(at), i);
  store<i32>(next, at + 1);
}
