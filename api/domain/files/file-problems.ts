/** One fault of an uploaded file, at its place. Lines count from 1, the header being line 1. */
export interface FileProblem {
  readonly line: number;
  readonly column: string | null;
  readonly value: string | null;
  readonly message: string;
}

export interface FileReport {
  readonly fileName: string;
  /** Rows of data looked at. */
  readonly rows: number;
  readonly problemCount: number;
  readonly problems: FileProblem[];
}

const MOST_SHOWN = 1000;
const LONGEST_VALUE = 80;

/** Collects what is wrong with a file: all of it is counted, the first thousand are shown. */
export class FileProblems {
  private readonly shown: FileProblem[] = [];
  private counted = 0;

  get count(): number {
    return this.counted;
  }

  add(line: number, column: string | null, value: string | null, message: string): void {
    this.counted += 1;
    if (this.shown.length >= MOST_SHOWN) return;
    this.shown.push({ line, column, value: value === null ? null : shortened(value), message });
  }

  report(fileName: string, rows: number): FileReport {
    return { fileName, rows, problemCount: this.counted, problems: [...this.shown].sort((a, b) => a.line - b.line) };
  }
}

function shortened(value: string): string {
  const printable = value.replaceAll(/\p{Cc}/gu, '�');
  return printable.length > LONGEST_VALUE ? `${printable.slice(0, LONGEST_VALUE)}…` : printable;
}

/** An uploaded file that is not taken; nothing of it is kept but this report. */
export class FileRefused extends Error {
  constructor(readonly report: FileReport) {
    super(`The file has ${report.problemCount} problem${report.problemCount === 1 ? '' : 's'}; nothing of it was stored.`);
    this.name = 'FileRefused';
  }
}
