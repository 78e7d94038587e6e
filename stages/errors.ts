/** Where an input went wrong and how to mend it. Every field is worded in one place, {@link InputError}. */
export interface InputFault {
  readonly file?: string;
  /** 1-based line in `file`. */
  readonly line?: number;
  /** Column of a log, by its heading or number. */
  readonly column?: string;
  /** Key of a configuration file, dotted: `logs.heater.current`. */
  readonly key?: string;
  /** The value as found. */
  readonly value?: string;
  readonly expected: string;
  readonly wayOut: string;
}

function wordFault(fault: InputFault): string {
  const place = [fault.file, fault.line].filter((part) => part !== undefined).join(":");
  const subject = fault.column ?? fault.key;
  const found =
    subject === undefined
      ? fault.value === undefined
        ? ""
        : `found ${JSON.stringify(fault.value)}; `
      : fault.value === undefined
        ? `${subject} is missing; `
        : `${subject} is ${JSON.stringify(fault.value)}; `;
  return `${place === "" ? "" : `${place}: `}${found}expected ${fault.expected}.\n  Way out: ${fault.wayOut}`;
}

/** The user's input cannot be used: exit code 2. The message is the whole report; no stack is shown. */
export class InputError extends Error {
  override readonly name = "InputError";
  readonly fault: InputFault;
  constructor(fault: InputFault) {
    super(wordFault(fault));
    this.fault = fault;
  }
}

/** The program contradicts itself: exit code 3. */
export class Defect extends Error {
  override readonly name = "Defect";
}

/** A formula was asked outside the range where it holds. */
export class DomainError extends Error {
  override readonly name = "DomainError";
  /** Index of the first offending element, if the argument was a column. */
  readonly index: number | undefined;
  constructor(message: string, index?: number) {
    super(message);
    this.index = index;
  }
}
