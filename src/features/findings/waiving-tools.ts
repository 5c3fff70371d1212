/** What a list needs from whoever can waive its findings. */
export interface WaivingTools {
  readonly onWaive: (findingKey: string) => void;
  readonly onWithdraw: (waiverId: string) => void;
}
