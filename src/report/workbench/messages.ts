/** What page and thread of the workbench say to each other. */
export interface SearchRequest {
  readonly kind: 'search';
  readonly formula: string;
  readonly cell: number;
  /** `name=value`, exact text. */
  readonly parameters: Readonly<Record<string, string>>;
  readonly range: number;
  /** Bytes the search may use. */
  readonly memory: number;
}

export type Request =
  | SearchRequest
  /** The certificate of the last search. */
  | { readonly kind: 'certify' }
  | { readonly kind: 'check'; readonly text: string }
  /** Stops a certificate or a check; a search is stopped by ending the thread. */
  | { readonly kind: 'cancel' };

/** The files of a result, each in full. */
export interface Files {
  readonly report: string;
  readonly json: string;
  readonly latex: string;
  readonly picture: string;
}

export type Reply =
  | { readonly kind: 'progress'; readonly what: string; readonly done: number }
  | { readonly kind: 'found'; readonly verdict: string; readonly body: string; readonly files: Files }
  | {
      readonly kind: 'certified';
      readonly id: string;
      readonly text: string;
      readonly files: Pick<Files, 'report'>;
    }
  | {
      readonly kind: 'checked';
      readonly status: 'accepted' | 'rejected' | 'malformed';
      readonly text: string;
    }
  | { readonly kind: 'failed'; readonly text: string };
