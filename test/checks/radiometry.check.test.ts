import { gateTopic } from '../support/gate.js';
import { solvers } from './solvers/radiometry.js';

gateTopic('radiometry', solvers, 30);
