import { join } from 'node:path';
import { demoFolder } from './cli/files.js';
import { planFile } from './cli/commands/plan.js';
import { openDepartment } from './cli/ground.js';
import { print } from './cli/output.js';

/** Until there are pages: plans the demo department and prints it. */
const department = openDepartment();
print(`${department.name}\n`);
process.exitCode = await planFile(join(demoFolder, 'requests.csv'), {});
