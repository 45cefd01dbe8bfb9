/** A datasheet as content, whatever it is then shown on. All texts are plain, of one line, with units. */
export interface Sheet {
  readonly title: string;
  readonly groups: readonly SheetGroup[];
  /** What was taken for what the file does not tell. */
  readonly notes?: readonly string[];
  readonly warnings: readonly string[];
  readonly cautions: readonly string[];
}

export interface SheetGroup {
  readonly heading: string;
  readonly blocks: readonly SheetBlock[];
}

export type SheetBlock =
  | { readonly kind: 'rows'; readonly rows: readonly SheetRow[] }
  | ({ readonly kind: 'table' } & SheetTable);

export interface SheetRow {
  readonly label: string;
  readonly value: string;
  /** What qualifies the value, for example the mesh's error. */
  readonly note?: string;
}

export interface SheetTable {
  /** Units stand in the head; a column with an empty unit has none. */
  readonly columns: readonly { readonly name: string; readonly unit: string }[];
  readonly rows: readonly (readonly string[])[];
  readonly caption?: string;
}
