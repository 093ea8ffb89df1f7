/** One line of a stream: its number from 0 and its text, or null when it is longer than allowed. */
export interface Line {
  readonly index: number;
  readonly text: string | null;
}

/** Cuts a stream of bytes into lines and gives them in groups. Empty lines are counted and left out. Memory: one group and one line. */
export async function* lineGroups(
  chunks: AsyncIterable<Uint8Array>,
  groupSize: number,
  mostBytes: number,
): AsyncGenerator<Line[]> {
  let group: Line[] = [];
  let index = 0;
  let held: Uint8Array[] = [];
  let heldBytes = 0;
  const take = (piece: Uint8Array) => {
    if (heldBytes + piece.length > mostBytes) {
      group.push({ index, text: null });
    } else {
      const text = Buffer.concat([...held, piece])
        .toString('utf8')
        .trim();
      if (text !== '') group.push({ index, text });
    }
    index++;
    held = [];
    heldBytes = 0;
  };
  for await (const chunk of chunks) {
    let from = 0;
    for (let at = chunk.indexOf(10); at >= 0; at = chunk.indexOf(10, from)) {
      take(chunk.subarray(from, at));
      from = at + 1;
      if (group.length >= groupSize) {
        yield group;
        group = [];
      }
    }
    const rest = chunk.subarray(from);
    heldBytes += rest.length;
    if (heldBytes <= mostBytes && rest.length > 0) held.push(rest);
    else if (heldBytes > mostBytes) held = [];
  }
  if (heldBytes > 0) take(new Uint8Array(0));
  if (group.length > 0) yield group;
}
