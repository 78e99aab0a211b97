export { readDepartment } from './read-department.js';
