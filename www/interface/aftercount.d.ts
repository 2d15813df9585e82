/** What `aftercount.js` brings. Every result is for study, teaching and exercises; show its `caution` with it. */
declare const aftercount: {
  /** Settles once texts can be worked out; fails where the browser has no WebAssembly, or a policy forbids it. */
  readonly ready: Promise<void>;
  /** Works out the text of an engagement. It never throws: what is wrong is a value. */
  outcome(text: string): AftercountOutcome | AftercountQuestion | AftercountProblems;
  /** The version, with a fingerprint of the build. */
  readonly version: string;
};

type AftercountBreaks = "x" | "y" | "both" | "neither";

type AftercountEnded = "break" | "clock" | "limit" | "equilibrium" | "growth" | "withdrawn" | "unfinished";

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
  /** The answer to a number in question, or to two; only where the text has such. */
  asked?: [AftercountAsked | AftercountMap];
  /** Who breaks first. */
  breaks: AftercountBreaks;
  /** When, in the text's unit of time; null if nobody breaks. */
  time: number | null;
  ended: AftercountEnded;
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
  asked: [AftercountAsked | AftercountMap];
  breaks?: undefined;
  x?: undefined;
  y?: undefined;
}

/** The answer to one number in question. */
interface AftercountAsked {
  /** Which number: `x.start`, `y.join.1.time`. */
  slot: string;
  /** The whole story along the number, in order. */
  outcomes: AftercountStretch[];
  /** Every interval on which all conditions of `sothat` hold; only where the text has conditions. */
  met?: AftercountInterval[];
  /** Where they hold nowhere, the value that comes nearest. */
  nearest?: AftercountNearest;
  /** Only where looking was ended early, since each fight took so much work. */
  cut_short?: true;
}

/** A stretch of values with the same outcome. */
interface AftercountStretch {
  from: number;
  to: number;
  breaks: AftercountBreaks;
  ended: AftercountEnded;
  /** The side whose enemy alone breaks, or that is left in the limit. */
  prevails: "x" | "y" | null;
}

interface AftercountInterval {
  from: number;
  to: number;
  /** Whether the conditions begin to hold there, or it is the edge of what was asked. */
  from_is: "crossing" | "edge";
  to_is: "crossing" | "edge";
}

interface AftercountNearest {
  value: number;
  /** Which condition is missed most, from 1. */
  condition: number;
  /** By how much, in the unit of that condition. */
  short: number;
  /** Where somebody must break in time and nobody does: the side nearest to its line, `short` being how far it is above. */
  unbroken?: "x" | "y";
}

/** The answer to two numbers in question; points and values are of the first and of the second. */
interface AftercountMap {
  slots: [string, string];
  /** Where they were looked at. */
  from: [number, number];
  to: [number, number];
  /** The lines along which the outcome flips. */
  flips: AftercountFlip[];
  /** Only where looking was ended early, since each fight took so much work. */
  cut_short?: true;
  /** The edge of where all conditions of `sothat` hold; only where the text has conditions. */
  met?: AftercountEdge[];
  /** The part of the map on which they hold, from 0 to 1. */
  met_share?: number;
  /** Where they were found to hold nowhere, the place that comes nearest. */
  nearest?: AftercountNearestPlace;
}

interface AftercountFlip {
  /** Who breaks first on its two sides. */
  between: [AftercountBreaks, AftercountBreaks];
  /** In order along the line. */
  points: [number, number][];
}

interface AftercountEdge {
  /** In order along the line: the conditions hold on the left hand. */
  points: [number, number][];
}

interface AftercountNearestPlace {
  values: [number, number];
  /** Which condition is missed most, from 1. */
  condition: number;
  /** By how much, in the unit of that condition. */
  short: number;
  /** Where somebody must break in time and nobody does: the side nearest to its line, `short` being how far it is above. */
  unbroken?: "x" | "y";
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
