/** What the patient's breathing allows, as far as scan time needs it. */
export interface BreathingAbility {
  /** Longest breath-hold to plan for, s; 0: cannot hold on command. */
  readonly holdSpanS: number;
  readonly breathsPerMinute: number;
}

/** The site's ways with breathing; editable, shown with their source in the policy. */
export interface BreathingRules {
  /** Rest between two holds, s. */
  readonly recoveryGapS: number;
  /** Most holds asked of a patient in one sequence. */
  readonly mostHolds: number;
  /** Part of each breath in which data are accepted when triggered, 0..1. */
  readonly acceptanceFraction: number;
}
