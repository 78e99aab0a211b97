import type { TissueRow } from './tissue-row.js';

/** Tissues of the head. T1, T2, T2* in ms, ADC in mm2/s. */
export const headTissues: readonly TissueRow[] = [
  {
    name: 'white matter',
    protonDensity: 0.77,
    adcMm2PerS: 0.7e-3,
    about: 'proton density: simulated brain database (Kwan 1999); ADC from memory',
    at: {
      1.5: {
        t1Ms: 681,
        t2Ms: 80,
        t2StarMs: 61,
        basis: 'published',
        source:
          'Gach 2008, T1 = A B0^C at 1.5 T, which lies below the 3 T value as it should (ex vivo 884, Stanisz 2005, does not); T2 as in Atlas, MRI of Brain and Spine, Table 2.1; T2* simulated brain database',
      },
      3: {
        t1Ms: 832,
        t2Ms: 79.6,
        t2StarMs: 45,
        basis: 'published',
        source: 'Wansapura 1999, quoted second-hand; T2* from memory',
      },
    },
  },
  {
    name: 'grey matter',
    protonDensity: 0.86,
    adcMm2PerS: 0.8e-3,
    about: 'proton density: simulated brain database (Kwan 1999); ADC from memory',
    at: {
      1.5: {
        t1Ms: 998,
        t2Ms: 100,
        t2StarMs: 69,
        basis: 'published',
        source:
          'Gach 2008, T1 = A B0^C at 1.5 T; T2 as in Atlas, MRI of Brain and Spine, Table 2.1; T2* simulated brain database',
      },
      3: {
        t1Ms: 1331,
        t2Ms: 110,
        t2StarMs: 50,
        basis: 'published',
        source: 'Wansapura 1999, quoted second-hand; T2* from memory',
      },
    },
  },
  {
    name: 'csf',
    protonDensity: 1,
    adcMm2PerS: 3e-3,
    about: 'proton density: simulated brain database (Kwan 1999); ADC from memory',
    at: {
      1.5: {
        t1Ms: 4200,
        t2Ms: 1990,
        t2StarMs: 58,
        basis: 'published',
        source:
          'Gach 2008, T1 the same at every field: close to the 3 T values measured in vivo, as free water should be (the simulated brain database has 2569/329); T2* from that database',
      },
      3: {
        t1Ms: 4308.7,
        t2Ms: 1885.5,
        t2StarMs: 58,
        basis: 'published',
        source: 'subarachnoid, relaxometry in vivo; T2* as in the simulated brain database',
      },
    },
  },
  {
    name: 'oedema-like lesion',
    protonDensity: 0.76,
    adcMm2PerS: 1.3e-3,
    about: 'proton density: simulated brain database, lesion; ADC from memory',
    at: {
      1.5: {
        t1Ms: 752,
        t2Ms: 237,
        t2StarMs: 204,
        basis: 'published',
        source: 'simulated brain database (Kwan 1999), lesion',
      },
      3: {
        t1Ms: 1003,
        t2Ms: 237,
        t2StarMs: 180,
        basis: 'assumption',
        source: '1.5 T value with T1 scaled as grey matter is (1331/998); T2 taken as the same',
      },
    },
  },
  {
    name: 'acute infarct',
    protonDensity: 0.79,
    adcMm2PerS: 0.4e-3,
    about: 'four hours old; ADC from memory; proton density assumed',
    at: {
      1.5: {
        t1Ms: 715,
        t2Ms: 87.8,
        t2StarMs: 63,
        basis: 'assumption',
        source: 'white matter with T2 + 1.94 ms per hour x 4 h (Damion 2019) and T1 + 5 %',
      },
      3: {
        t1Ms: 874,
        t2Ms: 87.4,
        t2StarMs: 47,
        basis: 'assumption',
        source: 'white matter with T2 + 1.94 ms per hour x 4 h (Damion 2019) and T1 + 5 %',
      },
    },
  },
  {
    name: 'blood products',
    protonDensity: 0.85,
    adcMm2PerS: 0.6e-3,
    about: 'deoxygenated; proton density assumed; ADC from memory',
    at: {
      1.5: {
        t1Ms: 1350,
        t2Ms: 50,
        t2StarMs: 12,
        basis: 'assumption',
        source: 'T1, T2: encyclopaedia level, deoxygenated blood; T2* assumed',
      },
      3: {
        t1Ms: 1584,
        t2Ms: 30,
        t2StarMs: 6,
        basis: 'assumption',
        source: 'T1: venous (Lu 2004); T2, T2* assumed shorter than at 1.5 T',
      },
    },
  },
  {
    name: 'enhancing lesion',
    protonDensity: 0.76,
    adcMm2PerS: 1.3e-3,
    about: 'proton density as the lesion; ADC from memory',
    at: {
      1.5: {
        t1Ms: 373,
        t2Ms: 170,
        t2StarMs: 120,
        basis: 'assumption',
        source:
          'lesion with 0.3 mmol/l of agent, relaxivities 4.5 and 5.5 per s per mmol/l (from memory)',
      },
      3: {
        t1Ms: 426,
        t2Ms: 170,
        t2StarMs: 110,
        basis: 'assumption',
        source:
          'lesion with 0.3 mmol/l of agent, relaxivities 4.5 and 5.5 per s per mmol/l (from memory)',
      },
    },
  },
  {
    name: 'flowing blood',
    protonDensity: 0.9,
    about: 'inflow is not modelled; proton density assumed',
    at: {
      1.5: { t1Ms: 1441, t2Ms: 290, basis: 'from memory', source: 'Stanisz 2005' },
      3: {
        t1Ms: 1664,
        t2Ms: 165,
        basis: 'published',
        source: 'T1 arterial (Lu 2004); T2 arterial, Atlas Table 2.1',
      },
    },
  },
  {
    name: 'fat',
    protonDensity: 1,
    adcMm2PerS: 0.05e-3,
    fatFraction: 1,
    about: 'proton density: simulated brain database',
    at: {
      1.5: { t1Ms: 288, t2Ms: 165, basis: 'from memory', source: 'subcutaneous, Gold 2004' },
      3: { t1Ms: 371, t2Ms: 133, basis: 'from memory', source: 'subcutaneous, Gold 2004' },
    },
  },
  {
    name: 'catheter',
    protonDensity: 0,
    about: 'gives no signal',
    at: {
      1.5: { t1Ms: 1000, t2Ms: 10, basis: 'assumption', source: 'no signal' },
      3: { t1Ms: 1000, t2Ms: 10, basis: 'assumption', source: 'no signal' },
    },
  },
];
