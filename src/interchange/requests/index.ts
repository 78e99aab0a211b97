export { readRequestsCsv, readRequestsJson, type ReadRequests } from './read-requests.js';
export { readRow, type BookedRequest } from './read-row.js';
export { requestColumns, neededColumns } from './columns.js';
export { parseDurationS } from './duration.js';
