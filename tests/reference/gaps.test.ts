import { gapCases } from '../../packages/fem-core/src/verify/cases.js';
import { holdCases } from './hold-cases.js';

holdCases(gapCases());
