import { gateTopic } from '../support/gate.js';
import { solvers as conduction } from './solvers/conduction.js';
import { solvers as damage } from './solvers/damage.js';
import { solvers as thresholds } from './solvers/damage-thresholds.js';
import { solvers as relaxation } from './solvers/relaxation.js';

gateTopic('relaxation', relaxation, 36);
gateTopic('conduction', conduction, 16);
gateTopic('damage', damage, 29);
gateTopic('damage-thresholds', thresholds, 10);
