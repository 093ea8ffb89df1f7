import { gateTopic } from '../support/gate.js';
import { solvers } from './solvers/transport.js';

gateTopic('transport', solvers, 82);
