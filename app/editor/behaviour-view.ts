/** How a linear model moves about its operating point: what the right page shows of the numbers. */
export interface BehaviourView {
  /** null: at the equilibrium; else why the numbers hold at the start values alone. */
  readonly note: string | null;
  /** Why there are no numbers. */
  readonly refusal: string | null;
  readonly states: readonly { readonly name: string; readonly value: string; readonly unit: string }[];
  readonly stable: boolean | null;
  readonly modes: readonly ModeView[];
  readonly channels: readonly ChannelView[];
}

export interface ModeView {
  readonly number: number;
  readonly eigenvalue: string;
  /** For the map: 1/s; of a pair the one above. */
  readonly re: number;
  readonly im: number;
  readonly frequency: string;
  readonly damping: string;
  readonly timeConstant: string;
  readonly states: string;
}

export interface ChannelView {
  readonly input: string;
  readonly output: string;
  readonly gain: string;
  readonly bandwidth: string;
  /** Magnitude in the unit of the output for each unit of the input, over Hz; empty where nothing passes. */
  readonly response: readonly {
    readonly frequency: number;
    readonly magnitude: number;
    readonly phase: number;
  }[];
  readonly unit: string;
}
