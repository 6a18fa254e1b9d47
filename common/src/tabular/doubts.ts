/** What is doubtful in a proposal. Each doubt lowers the confidence to its own at most; under 0.6 the program asks. */
export class Doubts {
  readonly remarks: string[] = [];
  confidence = 1;

  say(confidence: number, remark: string): void {
    this.confidence = Math.min(this.confidence, confidence);
    this.remarks.push(remark);
  }
}
