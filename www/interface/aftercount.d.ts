/** What `aftercount.js` brings. Every result is for study, teaching and exercises; show its `caution` with it. */
declare const aftercount: {
  /** Settles once texts can be worked out; fails where the browser has no WebAssembly, or a policy forbids it. */
  readonly ready: Promise<void>;
  /** Works out the text of an engagement. It never throws: what is wrong is a value. */
  outcome(text: string): AftercountOutcome | AftercountQuestion | AftercountProblems;
  /** The version, with a fingerprint of the build. */
  readonly version: string;
};

type AftercountMethod = "closed form" | "quadrature" | "integration";

/** What every answer to a text that can be worked out has. */
interface AftercountWords {
  ok: true;
  /** Belongs wherever the outcome is shown. */
  caution: string;
  /** The outcome in words, and the answer to each question. */
  sentence: string;
  /** The handling marking of the text; show it with the outcome. */
  marking: string | null;
  /** The text as Aftercount writes it. */
  link: string;
  /** The fingerprint of that text, as on the page. */
  text_mark: string;
}

interface AftercountOutcome extends AftercountWords {
  /** The answers to numbers in question, as on the command line; only where the text has such. */
  asked?: object[];
  /** Who breaks first. */
  breaks: "x" | "y" | "both" | "neither";
  /** When, in the text's unit of time; null if nobody breaks. */
  time: number | null;
  ended: "break" | "clock" | "limit" | "equilibrium" | "growth" | "withdrawn" | "unfinished";
  /** Who would be left if no side broke and no clock ran. */
  to_the_last: "x" | "y" | "parity" | null;
  /** When a side that fades without ever reaching 0 falls below one. */
  below_one: number | null;
  x: AftercountSide;
  y: AftercountSide;
  /** The losses of y over those of x, by fire and support; null over 0. */
  loss_exchange_ratio: number | null;
  /** The same, each over what its side committed. */
  fractional_exchange_ratio: number | null;
  /** The weakest method used. */
  method: AftercountMethod;
  pieces: { from: number; to: number | null; method: AftercountMethod }[];
}

/** Where a number in question has no value now there is an answer to the question, and no outcome: `breaks` tells. */
interface AftercountQuestion extends AftercountWords {
  asked: object[];
  breaks?: undefined;
  x?: undefined;
  y?: undefined;
}

interface AftercountSide {
  start: number;
  /** Infinity where reinforcement never ends; so are what was committed and lost then. */
  joined: number;
  withdrawn: number;
  committed: number;
  /** Strength at the break, at the clock, or the limit; null where it grows without bound. */
  end: number | null;
  losses: { fire: number; support: number; wastage: number; all: number };
}

interface AftercountProblems {
  ok: false;
  problems: {
    /** The key concerned; null where it is the whole text. */
    key: string | null;
    /** Which item of a list, from 1. */
    item: number | null;
    /** What stands there. */
    found: string | null;
    /** What is wrong, and how to write it instead. */
    problem: string;
  }[];
}
