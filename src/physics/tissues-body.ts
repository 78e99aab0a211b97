import type { TissueRow } from './tissue-row.js';

/** Tissues of abdomen and pelvis. T1, T2 in ms, ADC in mm2/s. */
export const bodyTissues: readonly TissueRow[] = [
  {
    name: 'liver',
    protonDensity: 0.9,
    adcMm2PerS: 1.1e-3,
    about: 'proton density assumed; ADC from memory',
    at: {
      1.5: { t1Ms: 586, t2Ms: 46, basis: 'from memory', source: 'de Bazelaire 2004' },
      3: { t1Ms: 809, t2Ms: 34, basis: 'published', source: 'de Bazelaire 2004' },
    },
  },
  {
    name: 'solid liver lesion',
    protonDensity: 0.9,
    adcMm2PerS: 1.0e-3,
    about: 'values assumed, between liver and spleen',
    at: {
      1.5: {
        t1Ms: 900,
        t2Ms: 75,
        basis: 'assumption',
        source: 'metastasis-like: longer T1 and T2 than liver',
      },
      3: {
        t1Ms: 1150,
        t2Ms: 62,
        basis: 'assumption',
        source: 'metastasis-like: longer T1 and T2 than liver',
      },
    },
  },
  {
    name: 'enhancing liver lesion',
    protonDensity: 0.9,
    adcMm2PerS: 1.0e-3,
    about: 'after contrast; values assumed',
    at: {
      1.5: {
        t1Ms: 300,
        t2Ms: 60,
        basis: 'assumption',
        source: 'T1 shortened by agent in the arterial phase',
      },
      3: {
        t1Ms: 340,
        t2Ms: 52,
        basis: 'assumption',
        source: 'T1 shortened by agent in the arterial phase',
      },
    },
  },
  {
    name: 'liver cyst',
    protonDensity: 1,
    adcMm2PerS: 2.5e-3,
    about: 'water-like; ADC from memory',
    at: {
      1.5: { t1Ms: 2500, t2Ms: 500, basis: 'assumption', source: 'water-like fluid' },
      3: { t1Ms: 3000, t2Ms: 500, basis: 'assumption', source: 'water-like fluid' },
    },
  },
  {
    name: 'fatty liver',
    protonDensity: 0.9,
    adcMm2PerS: 1.0e-3,
    fatFraction: 0.2,
    about: 'liver with a fifth of fat',
    at: {
      1.5: { t1Ms: 560, t2Ms: 48, basis: 'assumption', source: 'liver with a fifth of fat' },
      3: { t1Ms: 760, t2Ms: 40, basis: 'assumption', source: 'liver with a fifth of fat' },
    },
  },
  {
    name: 'spleen',
    protonDensity: 0.9,
    adcMm2PerS: 0.8e-3,
    about: 'proton density assumed; ADC from memory',
    at: {
      1.5: { t1Ms: 1057, t2Ms: 79, basis: 'from memory', source: 'de Bazelaire 2004' },
      3: { t1Ms: 1328, t2Ms: 61, basis: 'published', source: 'de Bazelaire 2004' },
    },
  },
  {
    name: 'kidney',
    protonDensity: 0.9,
    adcMm2PerS: 2e-3,
    about: 'proton density assumed; ADC from memory',
    at: {
      1.5: { t1Ms: 966, t2Ms: 87, basis: 'from memory', source: 'de Bazelaire 2004, cortex' },
      3: { t1Ms: 1142, t2Ms: 76, basis: 'published', source: 'de Bazelaire 2004, cortex' },
    },
  },
  {
    name: 'pancreas',
    protonDensity: 0.9,
    adcMm2PerS: 1.3e-3,
    about: 'proton density assumed; ADC from memory',
    at: {
      1.5: { t1Ms: 584, t2Ms: 46, basis: 'from memory', source: 'de Bazelaire 2004' },
      3: { t1Ms: 725, t2Ms: 43, basis: 'published', source: 'de Bazelaire 2004' },
    },
  },
  {
    name: 'bile',
    protonDensity: 1,
    adcMm2PerS: 2.7e-3,
    about: 'water-like fluid; no primary source was found',
    at: {
      1.5: { t1Ms: 2500, t2Ms: 600, basis: 'assumption', source: 'T2 above 500 ms, from memory' },
      3: { t1Ms: 2800, t2Ms: 600, basis: 'assumption', source: 'T2 above 500 ms, from memory' },
    },
  },
  {
    name: 'stone',
    protonDensity: 0,
    about: 'gives no signal',
    at: {
      1.5: { t1Ms: 1000, t2Ms: 10, basis: 'assumption', source: 'no signal' },
      3: { t1Ms: 1000, t2Ms: 10, basis: 'assumption', source: 'no signal' },
    },
  },
  {
    name: 'myometrium',
    protonDensity: 0.9,
    adcMm2PerS: 1.5e-3,
    about: 'proton density assumed; ADC from memory',
    at: {
      1.5: { t1Ms: 1309, t2Ms: 117, basis: 'from memory', source: 'de Bazelaire 2004' },
      3: { t1Ms: 1514, t2Ms: 79, basis: 'published', source: 'de Bazelaire 2004' },
    },
  },
  {
    name: 'endometrium',
    protonDensity: 0.9,
    adcMm2PerS: 1.4e-3,
    about: 'proton density assumed; ADC from memory',
    at: {
      1.5: { t1Ms: 1274, t2Ms: 101, basis: 'from memory', source: 'de Bazelaire 2004' },
      3: { t1Ms: 1453, t2Ms: 59, basis: 'published', source: 'de Bazelaire 2004' },
    },
  },
  {
    name: 'cervix',
    protonDensity: 0.9,
    adcMm2PerS: 1.5e-3,
    about: 'proton density assumed; ADC from memory',
    at: {
      1.5: { t1Ms: 1135, t2Ms: 58, basis: 'from memory', source: 'de Bazelaire 2004' },
      3: { t1Ms: 1616, t2Ms: 83, basis: 'published', source: 'de Bazelaire 2004' },
    },
  },
  {
    name: 'uterine or adnexal mass',
    protonDensity: 0.9,
    adcMm2PerS: 0.9e-3,
    about: 'values assumed',
    at: {
      1.5: {
        t1Ms: 1000,
        t2Ms: 160,
        basis: 'assumption',
        source: 'cell-rich mass, brighter than myometrium on T2',
      },
      3: {
        t1Ms: 1300,
        t2Ms: 120,
        basis: 'assumption',
        source: 'cell-rich mass, brighter than myometrium on T2',
      },
    },
  },
  {
    name: 'prostate',
    protonDensity: 0.9,
    adcMm2PerS: 1.5e-3,
    about: 'proton density assumed; ADC from memory',
    at: {
      1.5: { t1Ms: 1317, t2Ms: 88, basis: 'from memory', source: 'de Bazelaire 2004' },
      3: { t1Ms: 1597, t2Ms: 74, basis: 'published', source: 'de Bazelaire 2004' },
    },
  },
  {
    name: 'prostate lesion',
    protonDensity: 0.88,
    adcMm2PerS: 0.8e-3,
    about: 'values assumed; ADC from memory',
    at: {
      1.5: { t1Ms: 1250, t2Ms: 66, basis: 'assumption', source: 'darker than the gland on T2' },
      3: { t1Ms: 1500, t2Ms: 55, basis: 'assumption', source: 'darker than the gland on T2' },
    },
  },
  {
    name: 'amniotic fluid',
    protonDensity: 1,
    adcMm2PerS: 2.8e-3,
    about: 'water-like',
    at: {
      1.5: { t1Ms: 3000, t2Ms: 1000, basis: 'assumption', source: 'water-like fluid' },
      3: { t1Ms: 3300, t2Ms: 800, basis: 'assumption', source: 'water-like fluid' },
    },
  },
  {
    name: 'fetal brain',
    protonDensity: 0.95,
    adcMm2PerS: 1.4e-3,
    about: 'values assumed, longer than in adults',
    at: {
      1.5: { t1Ms: 1900, t2Ms: 200, basis: 'assumption', source: 'unmyelinated brain' },
      3: { t1Ms: 2200, t2Ms: 170, basis: 'assumption', source: 'unmyelinated brain' },
    },
  },
];
