import type { FrontMatter, ResolvedPlan } from '#lib/plan/types.ts';

/**
 * The faces of a book as plain .ttf files. Each face is a list of files that hold one range of scripts each, the usual
 * one first; a character is set from the first file that has it.
 */
export interface BookFonts {
  regular: readonly Uint8Array[];
  italic: readonly Uint8Array[];
  semibold: readonly Uint8Array[];
  mono: readonly Uint8Array[];
  monoBold: readonly Uint8Array[];
}

/** An uploaded picture. Only JPEG and PNG can be set; another type is shown by its description. */
export interface BookPicture {
  bytes: Uint8Array;
  type: string;
  width?: number;
  height?: number;
}

/** A published revision, for the table at the end of the book; dates are ISO 8601 days. */
export interface BookRevision {
  letter: string;
  date: string;
  notes: string;
}

/** Paper of a book: ISO A4 or US Letter, portrait. */
export type BookPaper = 'a4' | 'letter';

/** What a book is set from. */
export interface BookInput {
  /** The plan at one fit, in the units that it was resolved for. */
  resolved: ResolvedPlan;
  front: FrontMatter;
  /** Publishing name of the author: the legal owner in the title block. */
  imprint: string;
  /** Identification number in the title block. */
  planNumber: string;
  revision: { letter: string; date: string };
  paper: BookPaper;
  fonts: BookFonts;
  /** By the names that the plan calls them. */
  pictures: ReadonlyMap<string, BookPicture>;
  history: readonly BookRevision[];
  onProgress?: (share: number, stage: string) => void;
}
