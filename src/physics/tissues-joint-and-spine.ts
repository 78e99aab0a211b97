import type { TissueRow } from './tissue-row.js';

/** Tissues of spine and joints. T1, T2, T2* in ms, ADC in mm2/s. */
export const jointAndSpineTissues: readonly TissueRow[] = [
  {
    name: 'muscle',
    protonDensity: 1,
    adcMm2PerS: 1.4e-3,
    about: 'proton density: simulated brain database; ADC from memory',
    at: {
      1.5: { t1Ms: 1130, t2Ms: 35.3, basis: 'from memory', source: 'Gold 2004' },
      3: { t1Ms: 1420, t2Ms: 31.7, basis: 'from memory', source: 'Gold 2004' },
    },
  },
  {
    name: 'spinal cord',
    protonDensity: 0.55,
    adcMm2PerS: 0.9e-3,
    about:
      'proton density: 58.7 against 107.5 of CSF (synthetic relaxometry of the spine, PMC7410772)',
    at: {
      1.5: { t1Ms: 745, t2Ms: 74, t2StarMs: 50, basis: 'from memory', source: 'Stanisz 2005' },
      3: { t1Ms: 993, t2Ms: 78, t2StarMs: 40, basis: 'from memory', source: 'Stanisz 2005' },
    },
  },
  {
    name: 'cord lesion',
    protonDensity: 0.6,
    adcMm2PerS: 1.2e-3,
    about: 'proton density assumed',
    at: {
      1.5: {
        t1Ms: 900,
        t2Ms: 150,
        t2StarMs: 90,
        basis: 'assumption',
        source: 'oedema-like, between cord and lesion of the brain',
      },
      3: {
        t1Ms: 1150,
        t2Ms: 150,
        t2StarMs: 80,
        basis: 'assumption',
        source: 'oedema-like, between cord and lesion of the brain',
      },
    },
  },
  {
    name: 'disc',
    protonDensity: 0.73,
    about: 'proton density: 78.9 against 107.5 of CSF (same study)',
    at: {
      1.5: {
        t1Ms: 1164.9,
        t2Ms: 101.9,
        basis: 'published',
        source: 'normal disc, synthetic relaxometry of the spine; field not seen, taken as 1.5 T',
      },
      3: {
        t1Ms: 1300,
        t2Ms: 95,
        basis: 'assumption',
        source: '1.5 T value, T1 lengthened by a tenth',
      },
    },
  },
  {
    name: 'vertebral marrow',
    protonDensity: 0.85,
    fatFraction: 0.5,
    about: 'proton density: 91.1 against 107.5 of CSF; fat fraction assumed',
    at: {
      1.5: {
        t1Ms: 549,
        t2Ms: 49,
        t2StarMs: 20,
        basis: 'from memory',
        source: 'de Bazelaire 2004, L4',
      },
      3: { t1Ms: 586, t2Ms: 49, t2StarMs: 15, basis: 'published', source: 'de Bazelaire 2004, L4' },
    },
  },
  {
    name: 'marrow metastasis',
    protonDensity: 0.9,
    adcMm2PerS: 0.9e-3,
    fatFraction: 0,
    about: 'fat replaced; values assumed',
    at: {
      1.5: { t1Ms: 1000, t2Ms: 90, basis: 'assumption', source: 'cell-rich tissue without fat' },
      3: { t1Ms: 1200, t2Ms: 85, basis: 'assumption', source: 'cell-rich tissue without fat' },
    },
  },
  {
    name: 'nerve root',
    protonDensity: 0.7,
    about: 'proton density assumed',
    at: {
      1.5: { t1Ms: 800, t2Ms: 80, basis: 'assumption', source: 'as spinal cord' },
      3: { t1Ms: 1000, t2Ms: 78, basis: 'assumption', source: 'as spinal cord' },
    },
  },
  {
    name: 'cartilage',
    protonDensity: 0.85,
    about: 'proton density assumed',
    at: {
      1.5: { t1Ms: 1060, t2Ms: 42.1, basis: 'from memory', source: 'Gold 2004' },
      3: { t1Ms: 1240, t2Ms: 36.9, basis: 'from memory', source: 'Gold 2004' },
    },
  },
  {
    name: 'synovial fluid',
    protonDensity: 1,
    about: 'proton density of water',
    at: {
      1.5: { t1Ms: 2850, t2Ms: 1210, basis: 'from memory', source: 'Gold 2004' },
      3: { t1Ms: 3620, t2Ms: 767, basis: 'from memory', source: 'Gold 2004' },
    },
  },
  {
    name: 'meniscus',
    protonDensity: 0.6,
    about: 'proton density assumed',
    at: {
      1.5: { t1Ms: 800, t2Ms: 22, basis: 'assumption', source: 'short T2 of fibrocartilage' },
      3: { t1Ms: 950, t2Ms: 18, basis: 'assumption', source: 'short T2 of fibrocartilage' },
    },
  },
  {
    name: 'ligament',
    protonDensity: 0.5,
    about: 'proton density assumed',
    at: {
      1.5: { t1Ms: 700, t2Ms: 14, basis: 'assumption', source: 'short T2 of ordered collagen' },
      3: { t1Ms: 850, t2Ms: 12, basis: 'assumption', source: 'short T2 of ordered collagen' },
    },
  },
  {
    name: 'tendon',
    protonDensity: 0.5,
    about: 'proton density assumed',
    at: {
      1.5: { t1Ms: 600, t2Ms: 8, basis: 'assumption', source: 'short T2 of ordered collagen' },
      3: { t1Ms: 700, t2Ms: 7, basis: 'assumption', source: 'short T2 of ordered collagen' },
    },
  },
  {
    name: 'fluid in tear',
    protonDensity: 0.9,
    about: 'fluid mixed with torn tissue; values assumed',
    at: {
      1.5: {
        t1Ms: 2000,
        t2Ms: 250,
        basis: 'assumption',
        source: 'between synovial fluid and cartilage',
      },
      3: {
        t1Ms: 2400,
        t2Ms: 200,
        basis: 'assumption',
        source: 'between synovial fluid and cartilage',
      },
    },
  },
];
