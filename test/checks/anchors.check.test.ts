import { gateTopic } from '../support/gate.js';
import { solvers } from './solvers/anchors.js';

gateTopic('anchors', solvers, 35);
