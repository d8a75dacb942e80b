/** One-pole low-pass filter, exact for an input that runs straight between the values it is given. */
export class VideoFilter {
  private readonly hold: number;
  private readonly before: number;
  private readonly now: number;
  private input = 0;
  private output = 0;
  private started = false;

  /**
   * @param widthInRbw -3 dB width over RBW
   * @param stepInRbw time between values, times RBW
   */
  constructor(widthInRbw: number, stepInRbw: number) {
    const step = 2 * Math.PI * widthInRbw * stepInRbw;
    this.hold = Math.exp(-step);
    const mean = (1 - this.hold) / step;
    this.before = mean - this.hold;
    this.now = 1 - mean;
  }

  next(input: number): number {
    if (!this.started) {
      this.started = true;
      this.output = input;
    } else {
      this.output = this.hold * this.output + this.before * this.input + this.now * input;
    }
    this.input = input;
    return this.output;
  }
}
