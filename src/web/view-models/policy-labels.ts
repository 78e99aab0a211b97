import type { SitePolicy } from '../../exams/index.js';

type PolicySectionKey = Exclude<keyof SitePolicy, 'site' | 'signedBy' | 'signedOn'>;

/** Sections of the policy in the order they are shown. */
export const policySections: readonly { readonly key: PolicySectionKey; readonly name: string }[] =
  [
    { key: 'catalogue', name: 'What a kind of image may at most answer, where no entry is signed' },
    { key: 'physics', name: 'What must be seen' },
    { key: 'movement', name: 'Movement' },
    { key: 'breathing', name: 'Breathing' },
    { key: 'tolerance', name: 'What a patient can bear' },
    { key: 'time', name: 'Time' },
    { key: 'learning', name: "Learning from this site's own records" },
    { key: 'owed', name: 'Answers owed' },
  ];

/** Values whose name in the file says too little by itself. Others are shown by their name in words. */
export const policyLabels: Readonly<Record<string, string>> = {
  'catalogue.otherwise': '',
  'physics.relativeContrastToNoise': 'contrast over noise of the target, of the full-quality image',
  'physics.borderOverCaliper': 'width of the border, of what a caliper reading tolerates',
  'movement.cleanChance': 'chance of clean images',
  'movement.restCarryOver': 'time already spent that still counts after a rest',
  'movement.assumedElapsedS': 'time already spent, assumed when choosing',
  'movement.retakeUpToS': 'pieces taken again on the spot, up to',
  'movement.bladesCorrect': 'movements that rotating blades correct',
  'movement.shape': 'Weibull shape of the time to the first movement',
  breathing: 'breath-holds and triggering',
  'breathing.breathsPerMinute': 'breathing rate',
  'breathing.shape': 'Weibull shape of the time to failing a hold',
  'time.finishConfidence': 'wished chance that the exam ends inside its slot',
  'time.stayConfidence': 'wished chance that the patient bears the planned time',
  'time.entry': 'getting in',
  'time.exit': 'getting out',
  'time.idleBetweenS': 'between sequences',
  'time.coilChange': 'change of coil',
  'time.triggeredCv': 'variation of triggered acquisitions',
  'time.classExtraS': 'added to getting in',
  'time.transportExtraS': 'added to getting in',
  'tolerance.statedReached': 'a stated span is reached, said by',
  'tolerance.statedReachedLearned': 'a stated span is reached, by kind and who said it',
  'learning.leastRecords': 'least records of a group before they may replace a prior',
  'tolerance.still': 'keeps still where nobody was asked',
  'tolerance.stillChild': 'keeps still where nobody was asked',
  'tolerance.holdAdult': 'breath-hold of an adult',
  'tolerance.holdBreathless': 'breath-hold of a breathless patient',
  'tolerance.holdFromYears': 'no hold on command is planned below the age of',
  'tolerance.stay': 'bears being in the scanner',
  'tolerance.stayClaustrophobic': 'bears being in the scanner, claustrophobic',
  'tolerance.plannedReached': 'chance that must be left where nobody was asked',
  'owed.dueDays': 'due after the exam',
};
