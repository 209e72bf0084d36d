const NONE = -1;

/**
 * Can every slot have a place of its own? Bipartite matching by augmenting paths (Kuhn, Nav. Res. Logist. Q. 1955, 2, 83) that
 * starts from the last one found, because from one call to the next little changes. The answer does not depend on it.
 */
export class SlotMatching {
  private readonly kindOfSlot: Uint8Array;
  private readonly placeOfSlot: Int16Array;
  private readonly slotOfPlace: Int16Array;
  private readonly fits: Uint8Array;
  /** Search in which a place was seen last. */
  private readonly seenIn: Uint32Array;
  private search = 0;

  /** @param slots - how many slots of each kind. @param placeCount - places, numbered from 0. */
  constructor(
    slots: readonly number[],
    private readonly placeCount: number,
  ) {
    this.kindOfSlot = Uint8Array.from(slots.flatMap((count, kind) => new Array<number>(count).fill(kind)));
    this.placeOfSlot = new Int16Array(this.kindOfSlot.length).fill(NONE);
    this.slotOfPlace = new Int16Array(placeCount).fill(NONE);
    this.fits = new Uint8Array(slots.length * placeCount);
    this.seenIn = new Uint32Array(placeCount);
  }

  /** May slots of the kind take the place? At first none may. */
  allow(kind: number, place: number, isAllowed: boolean): void {
    this.fits[kind * this.placeCount + place] = isAllowed ? 1 : 0;
  }

  /** Place of a slot as found last; −1 = none. Slots are numbered by kind. */
  placeOf(slot: number): number {
    return this.placeOfSlot[slot];
  }

  /** Is the place of no slot, as found last? */
  isVacant(place: number): boolean {
    return this.slotOfPlace[place] === NONE;
  }

  isPossible(): boolean {
    const { kindOfSlot, placeOfSlot, slotOfPlace, fits, placeCount } = this;
    if (kindOfSlot.length > placeCount) return false;
    for (let slot = 0; slot < kindOfSlot.length; slot++) {
      const place = placeOfSlot[slot];
      if (place === NONE || fits[kindOfSlot[slot] * placeCount + place] === 1) continue;
      placeOfSlot[slot] = slotOfPlace[place] = NONE;
    }
    for (let slot = 0; slot < kindOfSlot.length; slot++) {
      if (placeOfSlot[slot] !== NONE) continue;
      this.search++;
      if (!this.place(slot)) return false;
    }
    return true;
  }

  private place(slot: number): boolean {
    const { fits, placeCount, slotOfPlace, seenIn, placeOfSlot } = this;
    const line = this.kindOfSlot[slot] * placeCount;
    for (let place = 0; place < placeCount; place++) {
      if (fits[line + place] === 0 || seenIn[place] === this.search) continue;
      seenIn[place] = this.search;
      const other = slotOfPlace[place];
      if (other !== NONE && !this.place(other)) continue;
      slotOfPlace[place] = slot;
      placeOfSlot[slot] = place;
      return true;
    }
    return false;
  }
}
