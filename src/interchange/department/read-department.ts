import { IANAZone } from 'luxon';
import { z } from 'zod';
import type { Department } from '../../day/index.js';
import type { Result } from '../../shared/index.js';
import { parseYaml, schemaProblems, type LibraryFile } from '../library/yaml-source.js';

const clockMinutes = z
  .string()
  .regex(/^([01]\d|2[0-3]):[0-5]\d$|^24:00$/, 'a 24-hour time such as "08:00"')
  .transform((text) => Number(text.slice(0, 2)) * 60 + Number(text.slice(3)));

const stretch = z
  .strictObject({ from: clockMinutes, to: clockMinutes })
  .refine((s) => s.to > s.from, { message: 'must end after it starts' })
  .transform((s) => ({ fromMin: s.from, toMin: s.to }));

/** A scanner as a department file or a scenario file gives it. */
export const scannerEntry = z.strictObject({
  id: z.string().regex(/^[A-Za-z0-9-]+$/, 'letters, figures and hyphens'),
  name: z.string().min(1),
  fieldT: z.union([z.literal(1.5), z.literal(3)]),
  boreCm: z.number().min(40).max(120),
  coils: z.array(z.string()).min(1),
  hours: z.array(stretch).min(1),
  breaks: z.array(stretch).default([]),
});

const departmentFile = z.strictObject({
  department: z.string().min(1),
  zone: z.string().refine((zone) => IANAZone.isValidZone(zone), {
    message: 'an IANA time zone such as Europe/Dublin',
  }),
  days: z.array(z.iso.date()).min(1),
  scanners: z.array(scannerEntry).min(1),
});

/** A department from its text file; every fault is named with its line. */
export function readDepartment(file: LibraryFile): Result<Department> {
  const source = parseYaml(file);
  if (source.kind === 'refused') return source;
  const parsed = departmentFile.safeParse(source.value.value);
  if (!parsed.success) {
    return {
      kind: 'refused',
      problems: schemaProblems(parsed.error, source.value, source.value.value, 'department'),
    };
  }
  const { department, zone, days, scanners } = parsed.data;
  return { kind: 'ok', value: { name: department, zone, days, scanners } };
}
