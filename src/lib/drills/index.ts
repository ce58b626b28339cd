/** The room's door for pages and services. */
export * from './types';
export { DRILL_INTERVALS, DRILL_NAMES, DRILL_PIANOS, TOLERANCE_SET_IDS } from './catalogue';
export { intervalCheck, type IntervalCheck } from './checks';
export { DEFAULT_OPTIONS, generateBlock, isKnownEngineVersion } from './generate';
export { generateOddOneTrial, oddOneStringsCents } from './odd-one';
export { scoreBlock, scoreTrial, scorers } from './score';
export { checkSubmission } from './submission';
