import { gateTopic } from '../support/gate.js';
import { solvers } from './solvers/spectra.js';

gateTopic('spectra', solvers, 149);
