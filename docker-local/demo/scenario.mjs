/**
 * The demo clinic: invented people and six weeks of their standing. Days count back from the day of seeding, times are the clinic's
 * (`timeZone` 'machine': where the demo runs, so that its mornings are the viewer's).
 * One person improves clearly, one changes less than measurement error, one gets worse, one is nearly ready to walk, one has no clips yet.
 */

export const PASSWORD = 'stand-tall-together'

const CHECKLIST = [
  'Frame charged, both batteries seated',
  'Supports on, flat, not twisted',
  'Room to breathe under the band',
  'Brakes on before the stand',
  'Shoes on, feet on the floor marks',
  'Second person present',
]

/** One visit. `seconds`, `exertion` and `buckles` go by bout; `support` is % of body mass; `vitals`: systolic, diastolic, heart rate, saturation at rest, then the fall of the systolic on standing. */
const visit = (daysAgo, support, assistance, helpers, seconds, more = {}) => ({ daysAgo, support, assistance, helpers, seconds, ...more })
const clipOf = (file, bout, more = {}) => ({ file, bout, ...more })

const NADIA = {
  key: 'nadia', name: 'Nadia Ferreyra', recordNumber: 'AB-10417', age: 58, birthday: '04-09', weakerSide: 'right', heightCm: 165, massKg: 64, strokeDaysAgo: 77,
  precautions: [{ kind: 'shoulder-subluxation', note: 'Right shoulder: support the forearm before she stands' }, { kind: 'other', note: 'Stop above 180 systolic' }],
  notes: 'Wants to stand at her own kitchen counter. Tires in the afternoon, so mornings.',
  team: ['maren', 'colm'], at: '09:15', aids: ['shoulder-support', 'shoes'], vitals: [132, 80, 84, 97, 8],
  consents: [{ kind: 'recording', daysAgo: 40 }, { kind: 'teaching', daysAgo: 33, note: 'Masked copies only' }, { kind: 'sharing', daysAgo: 24, note: 'Her daughter may see her before and after' }],
  visits: [
    visit(38, 40, 'substantial', 2, [40, 55, 45, 30], { by: 'maren', exertion: [6, 7, 7, 8], buckles: [2, 3, 2, 3], notes: 'First stands in the frame. Right knee gives way without a hand in front of it.', clips: [clipOf('nadia-side-01.mp4', 1), clipOf('nadia-front-01.mp4', 2)] }),
    visit(35, 40, 'substantial', 2, [60, 62, 58, 60], { by: 'maren', exertion: [6, 6, 7, 7], buckles: [2, 2, 1, 2], notes: 'A minute each time. Asked for music.', clips: [clipOf('nadia-side-02.mp4', 1)] }),
    visit(31, 35, 'substantial', 2, [75, 75, 75, 75], { by: 'colm', exertion: [5, 6, 6, 7], buckles: [1, 2, 2, 2], notes: 'Lift lowered by one step; leaned into the band at the end of each bout.', clips: [clipOf('nadia-side-03.mp4', 2)] }),
    visit(28, 35, 'substantial', 2, [80, 65, 70, 60, 55], { by: 'maren', exertion: [5, 5, 6, 6, 7], buckles: [1, 1, 2, 1, 2], notes: 'No clip today, the camera was on loan.' }),
    visit(24, 30, 'partial', 1, [80, 95, 85, 75, 65], { by: 'maren', exertion: [5, 5, 5, 6, 6], buckles: [1, 1, 1, 1, 2], notes: 'One helper is enough now.', clips: [clipOf('nadia-side-04.mp4', 1)] }),
    visit(21, 30, 'partial', 1, [120, 120, 120, 120], { by: 'colm', exertion: [5, 5, 5, 6], buckles: [1, 0, 1, 1], notes: 'Two minutes, four times.', clips: [clipOf('nadia-side-05.mp4', 2)] }),
    visit(17, 25, 'partial', 1, [105, 110, 110, 105], { by: 'maren', exertion: [6, 6, 6, 6], buckles: [1, 1, 2, 1], notes: 'Hands off the pelvis for the first time; the frame catches the rest.', clips: [clipOf('nadia-side-06.mp4', 1)] }),
    visit(14, 25, 'partial', 1, [140, 140, 140, 140], { by: 'maren', exertion: [5, 5, 5, 5], buckles: [1, 0, 1, 1], clips: [clipOf('nadia-side-07.mp4', 2)] }),
    visit(10, 25, 'partial', 1, [160, 165, 160, 155], { by: 'colm', exertion: [4, 5, 5, 5], buckles: [0, 1, 0, 1], clips: [clipOf('nadia-side-08.mp4', 1)] }),
    visit(7, 20, 'partial', 1, [175, 180, 175, 170], { by: 'maren', exertion: [5, 5, 5, 5], buckles: [1, 0, 1, 1], notes: 'Three minutes. Storage cupboard blocked the camera place, so no clip.' }),
    visit(3, 20, 'supervision', 0, [195, 200, 205, 180], { by: 'maren', exertion: [4, 4, 5, 5], buckles: [0, 1, 0, 0], cues: 'Press the right heel down', clips: [clipOf('nadia-side-09.mp4', 2)] }),
    visit(0, 20, 'supervision', 0, [205, 215, 230, 210], { by: 'maren', exertion: [4, 4, 4, 5], buckles: [1, 0, 1, 0], cues: 'Press the right heel down', notes: 'Stood up from the bench with one cue. Longest stand so far.', clips: [clipOf('nadia-side-10.mp4', 2), clipOf('nadia-front-02.mp4', 1), clipOf('nadia-stand-up.mov', null)] }),
  ],
}

const JOAQUIM = {
  key: 'joaquim', name: 'Joaquim Vestergaard', recordNumber: 'AB-10388', age: 66, birthday: '11-02', weakerSide: 'left', heightCm: 176, massKg: 78, strokeDaysAgo: 103,
  precautions: [{ kind: 'skin-under-supports', note: 'Check the left lower ribs after each bout' }], visualFieldLossSide: 'left',
  notes: 'Retired boat builder. Counts the minutes himself.',
  team: ['maren', 'colm'], at: '10:30', aids: ['ankle-foot-orthosis', 'shoes'], vitals: [128, 76, 72, 98, 6],
  consents: [{ kind: 'recording', daysAgo: 41 }, { kind: 'teaching', daysAgo: 41 }],
  visits: [
    visit(38, 25, 'partial', 1, [95, 110, 120, 105], { by: 'maren', exertion: [5, 5, 6, 6], buckles: [1, 0, 1, 1], clips: [clipOf('joaquim-side-01.mp4', 2)] }),
    visit(34, 25, 'partial', 1, [120, 130, 125, 115], { by: 'maren', exertion: [5, 5, 5, 6], buckles: [0, 1, 1, 1] }),
    visit(31, 25, 'partial', 1, [135, 150, 140, 130], { by: 'colm', exertion: [5, 5, 5, 5], buckles: [0, 0, 1, 1] }),
    visit(27, 20, 'partial', 1, [150, 165, 160, 140], { by: 'maren', exertion: [5, 5, 5, 6], buckles: [1, 0, 1, 0] }),
    visit(24, 20, 'partial', 1, [165, 185, 180, 160], { by: 'maren', exertion: [4, 5, 5, 5], buckles: [0, 0, 0, 1], clips: [clipOf('joaquim-side-02.mp4', 1)] }),
    visit(20, 20, 'supervision', 1, [180, 205, 190], { by: 'colm', exertion: [4, 4, 5], buckles: [0, 0, 1], notes: 'Helper stays within reach, hands off.' }),
    visit(17, 15, 'supervision', 0, [200, 225, 215], { by: 'maren', exertion: [4, 5, 5], buckles: [0, 1, 0] }),
    visit(13, 15, 'supervision', 0, [215, 240, 230], { by: 'maren', exertion: [4, 4, 5], buckles: [0, 0, 0] }),
    visit(10, 10, 'supervision', 0, [235, 255, 240], { by: 'maren', exertion: [4, 4, 4], buckles: [0, 0, 0], clips: [clipOf('joaquim-side-03.mp4', 1)] }),
    visit(6, 10, 'supervision', 0, [245, 270, 260], { by: 'colm', exertion: [4, 4, 4], buckles: [0, 0, 0], notes: 'Talks through the whole stand, not short of breath.' }),
    visit(3, 10, 'set-up', 0, [260, 280, 270], { by: 'maren', exertion: [3, 4, 4], buckles: [0, 0, 0], notes: 'Twenty seconds short of five minutes.', clips: [clipOf('joaquim-side-04.mp4', 1), clipOf('joaquim-front-01.mp4', 2)] }),
  ],
}

const WALTER = {
  key: 'walter', name: 'Walter Osei-Lind', recordNumber: 'AB-10402', age: 71, birthday: '08-27', weakerSide: 'left', heightCm: 172, massKg: 92, strokeDaysAgo: 88,
  precautions: [{ kind: 'shoulder-pain', note: 'Left, worse above the shoulder' }, { kind: 'weight-bearing-limit', note: 'Right hip replaced 2019: no limit from the surgeon' }], lateropulsion: 'left',
  notes: 'Steady from week to week. Likes to know the number before he is told it is good.',
  team: ['maren', 'colm'], at: '14:15', aids: ['quadriceps-stimulation', 'shoes'], vitals: [146, 86, 78, 96, 9],
  consents: [{ kind: 'recording', daysAgo: 40 }, { kind: 'teaching', daysAgo: 30 }],
  visits: [
    visit(37, 30, 'partial', 1, [80, 95, 90, 85], { by: 'maren', exertion: [6, 6, 6, 7], buckles: [1, 1, 2, 1], clips: [clipOf('walter-side-01.mp4', 1)] }),
    visit(34, 30, 'partial', 1, [85, 100, 95], { by: 'colm', exertion: [6, 6, 6], buckles: [1, 1, 1] }),
    visit(30, 30, 'partial', 1, [90, 105, 100, 85], { by: 'maren', exertion: [5, 6, 6, 7], buckles: [1, 1, 1, 2] }),
    visit(27, 30, 'partial', 1, [85, 100, 95, 80], { by: 'maren', exertion: [6, 6, 6, 6], buckles: [2, 1, 1, 1] }),
    visit(23, 30, 'partial', 1, [95, 110, 100, 90], { by: 'maren', exertion: [5, 6, 6, 6], buckles: [1, 1, 1, 1], clips: [clipOf('walter-side-02.mp4', 1)] }),
    visit(20, 30, 'partial', 1, [90, 100, 95], { by: 'colm', exertion: [6, 6, 6], buckles: [1, 1, 1], notes: 'Slept badly.' }),
    visit(16, 30, 'partial', 1, [95, 105, 100, 85], { by: 'maren', exertion: [5, 6, 6, 6], buckles: [1, 0, 1, 1] }),
    visit(13, 30, 'partial', 1, [100, 110, 95], { by: 'maren', exertion: [5, 6, 6], buckles: [1, 1, 1] }),
    visit(9, 30, 'partial', 1, [90, 105, 100, 95], { by: 'colm', exertion: [6, 6, 6, 6], buckles: [1, 1, 1, 1], clips: [clipOf('walter-side-03.mp4', 1)] }),
    visit(6, 30, 'partial', 1, [95, 108, 100], { by: 'maren', exertion: [5, 6, 6], buckles: [1, 1, 0] }),
    visit(2, 30, 'partial', 1, [95, 110, 105, 90], { by: 'maren', exertion: [5, 6, 6, 6], buckles: [1, 1, 1, 1], notes: 'Alignment as before. Try a wider stance next time.', clips: [clipOf('walter-side-04.mp4', 1), clipOf('walter-front-01.mp4', 2, { status: 'draft', markedBy: 'colm' })] }),
  ],
}

const PRUE = {
  key: 'prue', name: 'Prue Hallworth', recordNumber: 'AB-10395', age: 76, birthday: '02-14', weakerSide: 'right', heightCm: 157, massKg: 57, strokeDaysAgo: 95,
  precautions: [{ kind: 'other', note: 'Blood pressure before and after each stand' }], hasAphasia: true, neglectSide: 'right',
  notes: 'Chest infection three weeks ago. Understands short sentences, answers with pictures.',
  team: ['maren'], at: '13:00', aids: ['shoes'], vitals: [126, 74, 80, 95, 12],
  consents: [{ kind: 'recording', daysAgo: 39, givenBy: 'Edmund Hallworth', givenByRelation: 'proxy', note: 'Her husband, present at the talk' }],
  visits: [
    visit(36, 30, 'partial', 1, [110, 125, 120], { by: 'maren', exertion: [5, 5, 6], buckles: [0, 1, 1], clips: [clipOf('prue-side-01.mp4', 1)] }),
    visit(32, 30, 'partial', 1, [105, 120, 115], { by: 'maren', exertion: [5, 5, 6], buckles: [1, 0, 1] }),
    visit(29, 30, 'partial', 1, [110, 125, 110], { by: 'maren', exertion: [5, 5, 6], buckles: [0, 1, 1] }),
    visit(25, 30, 'partial', 1, [100, 115, 105], { by: 'maren', exertion: [5, 6, 6], buckles: [1, 1, 1] }),
    visit(22, 30, 'partial', 1, [95, 110, 100], { by: 'maren', exertion: [6, 6, 6], buckles: [1, 1, 1], notes: 'Coughs, temperature taken by the ward.', clips: [clipOf('prue-side-02.mp4', 1)] }),
    visit(18, 30, 'partial', 1, [90, 105, 90], { by: 'maren', exertion: [6, 6, 7], buckles: [1, 2, 1] }),
    visit(15, 30, 'partial', 1, [80, 95, 85], { by: 'maren', exertion: [6, 7, 7], buckles: [1, 2, 2] }),
    visit(11, 35, 'substantial', 2, [70, 90, 75], { by: 'maren', exertion: [6, 7, 7], buckles: [2, 2, 2], notes: 'More lift and a second helper again.' }),
    visit(8, 35, 'substantial', 2, [65, 80, 70], { by: 'maren', exertion: [7, 7, 7], buckles: [2, 2, 2], clips: [clipOf('prue-side-03.mp4', 1)] }),
    visit(4, 35, 'substantial', 2, [60, 75], { by: 'maren', exertion: [7, 7], buckles: [2, 2], fall: 18, symptoms: ['light-headedness'], ended: 'blood-pressure', notes: 'Light-headed in the second stand, sat down at once. Ward doctor told.' }),
    visit(1, 35, 'substantial', 2, [60, 75, 55], { by: 'maren', exertion: [7, 7, 8], buckles: [2, 2, 3], clips: [clipOf('prue-side-04.mp4', 1), clipOf('prue-back-01.mp4', 2)] }),
  ],
}

const ORLA = {
  key: 'orla', name: 'Orla Tennfjord', recordNumber: 'AB-10431', age: 47, birthday: '06-21', weakerSide: 'right', heightCm: 169, massKg: 66, strokeDaysAgo: 23,
  precautions: [{ kind: 'lines-and-catheters', note: 'Line in the left forearm until Friday' }], hasAphasia: true,
  notes: 'Sitting balance first.',
  team: ['maren'], at: '08:30', aids: [], vitals: [118, 72, 76, 98, 5],
  consents: [{ kind: 'recording', daysAgo: 5 }],
  visits: [
    visit(4, 0, 'substantial', 2, [], { by: 'maren', notes: 'Sat on the edge of the bed for six minutes with two people.' }),
    visit(0, 0, 'partial', 1, [], { by: 'maren', notes: 'First sitting balance without hands: twenty seconds. No stand today.' }),
  ],
}

const TILDA = {
  key: 'tilda', name: 'Tilda Ashgrove', recordNumber: 'QL-2207', age: 63, birthday: '09-30', weakerSide: 'left', heightCm: 160, massKg: 61, strokeDaysAgo: 52,
  precautions: [], team: ['bram'], at: '11:00', aids: ['shoes'], vitals: [124, 78, 74, 97, 5],
  consents: [{ kind: 'recording', daysAgo: 9 }],
  visits: [visit(9, 30, 'partial', 1, [60, 70], { by: 'bram', exertion: [5, 5], buckles: [0, 1] }), visit(2, 25, 'partial', 1, [80, 95, 90], { by: 'bram', exertion: [4, 5, 5], buckles: [0, 0, 1] })],
}

export const CLINICS = [
  {
    key: 'alderbay', name: 'Alder Bay Rehabilitation', timeZone: 'machine', units: 'metric',
    members: [
      { key: 'maren', email: 'therapist@alderbay.example', name: 'Maren Duarte, PT', roles: ['therapist'] },
      { key: 'colm', email: 'therapist2@alderbay.example', name: 'Colm Asante, PT', roles: ['therapist'] },
      { key: 'yuki', email: 'student@alderbay.example', name: 'Yuki Brandt', roles: ['student'] },
      { key: 'tomas', email: 'student2@alderbay.example', name: 'Tomas Hearne', roles: ['student'] },
      { key: 'amara', email: 'student3@alderbay.example', name: 'Amara Quist', roles: ['student'] },
      { key: 'ines', email: 'admin@alderbay.example', name: 'Ines Halloran', roles: ['administrator'] },
    ],
    patientAccount: { key: 'nadia-account', email: 'patient@alderbay.example', patient: 'nadia' },
    patients: [NADIA, JOAQUIM, WALTER, PRUE, ORLA],
  },
  {
    key: 'quarrylane', name: 'Quarry Lane Rehabilitation', timeZone: 'Europe/Dublin', units: 'metric',
    members: [{ key: 'bram', email: 'therapist@otherclinic.example', name: 'Bram Ellwood, PT', roles: ['therapist'] }],
    patients: [TILDA],
  },
]

export { CHECKLIST }
