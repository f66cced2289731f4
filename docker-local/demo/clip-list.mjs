/**
 * The clips of the demo clinic: who is drawn, from which side, with which angles. `make-clips.mjs` renders them, `seed.mjs` uploads them.
 * Angles in degrees with the signs of the measures; they hold exactly at the first of the `marked` frames, around which the person sways.
 */

const ROOMS = {
  gym: { room: 'gym', doorX: 1150, stickX: 930, pictureX: -1000, plantX: -900, railTo: -470 },
  gymFront: { room: 'gym', doorX: 960, stickX: 680, pictureX: -1330, railTo: -700 },
  ward: { room: 'ward', doorX: -1150, doorOpens: -1, stickX: -930, railTo: -3000, pictureX: 520, sunX: -700 },
  wardFront: { room: 'ward', doorX: -960, doorOpens: -1, stickX: -680, railTo: -3000, sunX: -500 },
  clinic: { room: 'clinic', doorX: -1170, doorOpens: -1, stickX: -940, railTo: -3000, plantX: 900, pictureX: 480, sunX: -600 },
  clinicFront: { room: 'clinic', doorX: -970, doorOpens: -1, stickX: -690, railTo: -3000, plantX: 1050, sunX: -500 },
  corner: { room: 'gym', doorX: 1160, stickX: 940, pictureX: -980, railTo: -640, sunX: -1300 },
}

const SIDE_SWAY = { trunk: 0.5, thigh: 0.18, shank: 0.22, craniovertebral: 0.5, upperArm: 0.4 }
const FRONT_SWAY = { lean: 0.5, shoulderTilt: 0.3, pelvicTilt: 0.15, midlineShift: 0.02, headTilt: 0.5 }

function side(person, scene, camera, [trunk, thigh, shank, craniovertebral], more = {}) {
  const pose = { trunk, thigh, shank, craniovertebral, upperArm: 12 + trunk * 0.4, forearm: 85 }
  return { person, view: 'sagittal', width: 960, height: 720, fps: 25, seconds: 3.4, marked: [41], scene: ROOMS[scene], camera: { share: 0.78, floor: 0.92, ...camera }, pose, sway: SIDE_SWAY, ...more }
}

function front(person, scene, camera, pose, more = {}) {
  return { person, view: 'frontal-anterior', width: 960, height: 720, fps: 25, seconds: 3.2, marked: [36], scene: ROOMS[scene], camera: { share: 0.78, floor: 0.92, ...camera }, pose, sway: FRONT_SWAY, ...more }
}

const RIGHT = { at: 0.4, rollDegrees: 0.4 }
const nadia = (angles, more) => side('nadia', 'gym', RIGHT, angles, more)
const joaquim = (angles, more) => side('joaquim', 'clinic', { at: 0.6, rollDegrees: -0.6 }, angles, { facing: 'left', width: 1080, height: 810, fps: 30, seconds: 3, ...more })
const walter = (angles, more) => side('walter', 'ward', { at: 0.6, rollDegrees: 1.4 }, angles, { facing: 'left', ...more })
const prue = (angles, more) => side('prue', 'corner', { at: 0.41, rollDegrees: 0.2 }, angles, { fps: 30, seconds: 3, ...more })

/** Sitting, bringing the trunk over the feet, rising, standing: seconds and angles. */
const STAND_UP = [
  [0, { trunk: 5, thigh: 84, shank: 3, craniovertebral: 46, gaze: 14, upperArm: 34, forearm: 52 }],
  [0.9, { trunk: 6, thigh: 84, shank: 4, craniovertebral: 46, gaze: 14, upperArm: 34, forearm: 52 }],
  [1.7, { trunk: 36, thigh: 83, shank: 12, craniovertebral: 30, gaze: 4, upperArm: 42, forearm: 60 }],
  [2.3, { trunk: 38, thigh: 58, shank: 19, craniovertebral: 30, gaze: 4, upperArm: 38, forearm: 56 }],
  [3.0, { trunk: 20, thigh: 20, shank: 11, craniovertebral: 38, gaze: 9, upperArm: 24, forearm: 40 }],
  [3.6, { trunk: 7.5, thigh: 6, shank: 4, craniovertebral: 43, gaze: 13, upperArm: 14, forearm: 28 }],
  [4.4, { trunk: 6, thigh: 5, shank: 2.5, craniovertebral: 44, gaze: 14, upperArm: 12, forearm: 26 }],
]

export const CLIPS = {
  'nadia-side-01.mp4': nadia([14.8, 6.5, 12.5, 39], { helper: true }),
  'nadia-side-02.mp4': nadia([13.1, 5.8, 11.2, 40], { helper: true }),
  'nadia-side-03.mp4': nadia([12.4, 5.4, 10.6, 40], { helper: true }),
  'nadia-side-04.mp4': nadia([11.2, 3.8, 9.2, 41], { helper: true }),
  'nadia-side-05.mp4': nadia([9.2, 3.8, 8.2, 41], { helper: true }),
  'nadia-side-06.mp4': nadia([9.9, 4.4, 9.6, 42]),
  'nadia-side-07.mp4': nadia([8.3, 3.9, 6.1, 42]),
  'nadia-side-08.mp4': nadia([7.9, 3.7, 4.3, 42]),
  'nadia-side-09.mp4': nadia([7.6, 3.6, 2.8, 43]),
  'nadia-side-10.mp4': nadia([5.4, 4.6, 0.4, 43]),
  'nadia-front-01.mp4': front('nadia', 'gymFront', { at: 0.44, rollDegrees: 0.4 }, { shoulderTilt: 4.5, pelvicTilt: 2.5, headTilt: -3, lean: 5.5, midlineShift: 0.42, kneeLeft: 5, kneeRight: 10 }),
  'nadia-front-02.mp4': front('nadia', 'gymFront', { at: 0.44, rollDegrees: 0.4 }, { shoulderTilt: 2, pelvicTilt: 1.5, headTilt: -1, lean: 1.8, midlineShift: 0.16, kneeLeft: 5, kneeRight: 7 }),
  'nadia-stand-up.mov': {
    person: 'nadia', view: 'sagittal', width: 720, height: 1280, fps: 30, seconds: 4.6, marked: [], codec: 'hevc', turned: true, frame: false, bench: { height: 408, from: -900, to: -250 },
    scene: { room: 'gym', doorX: 600, stickX: 430, railTo: -2000, sunX: -1500 }, camera: { share: 0.6, floor: 0.84, at: 0.55, rollDegrees: -0.8 }, keys: STAND_UP,
  },
  'joaquim-side-01.mp4': joaquim([8.1, 4.2, 7.8, 44]),
  'joaquim-side-02.mp4': joaquim([5.6, 3.0, 6.0, 45]),
  'joaquim-side-03.mp4': joaquim([3.4, 2.1, 3.9, 46], { marked: [30, 52, 74] }),
  'joaquim-side-04.mp4': joaquim([2.4, 1.6, 2.4, 47], { marked: [30, 52, 74] }),
  'joaquim-front-01.mp4': front('joaquim', 'clinicFront', { at: 0.56, rollDegrees: -0.6 }, { shoulderTilt: -1.5, pelvicTilt: -0.5, headTilt: 0.5, lean: -1.2, midlineShift: -0.08, kneeLeft: 6, kneeRight: 5 }, { width: 1080, height: 810 }),
  'walter-side-01.mp4': walter([8.6, 4.0, 7.0, 42]),
  'walter-side-02.mp4': walter([7.4, 4.6, 7.4, 43]),
  'walter-side-03.mp4': walter([8.3, 3.9, 6.6, 42]),
  'walter-side-04.mp4': walter([7.9, 4.2, 6.8, 42]),
  'walter-front-01.mp4': front('walter', 'wardFront', { at: 0.56, rollDegrees: 1.4 }, { shoulderTilt: -3.5, pelvicTilt: -2, headTilt: 2, lean: -3.8, midlineShift: -0.3, kneeLeft: 9, kneeRight: 5 }),
  'prue-side-01.mp4': prue([6.8, 3.2, 4.8, 41]),
  'prue-side-02.mp4': prue([7.5, 3.6, 5.6, 40]),
  'prue-side-03.mp4': prue([9.6, 5.0, 7.2, 38]),
  'prue-side-04.mp4': prue([11.6, 6.2, 9.0, 36], { helper: true }),
  'prue-back-01.mp4': front('prue', 'corner', { at: 0.36, rollDegrees: 0.2 }, { shoulderTilt: 3.2, pelvicTilt: 1.8, headTilt: -2, lean: 3.6, midlineShift: 0.28 }, { view: 'frontal-posterior', scene: { room: 'gym', doorX: 980, stickX: 700, pictureX: -1250, railTo: -700, sunX: -1300 } }),
}
