import { bodyCases, conductorCases } from '../../packages/fem-core/src/verify/cases.js';
import { holdCases } from './hold-cases.js';

holdCases([...conductorCases(), ...bodyCases()]);
