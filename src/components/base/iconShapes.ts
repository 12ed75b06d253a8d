/** Tools and flags, on a grid of 24, as 2 px round strokes. */
export const ICON_SHAPES = {
  in: 'M13 4h6v16h-6M4 12h10M10 8l4 4-4 4',
  out: 'M11 4H5v16h6M10 12h10M16 8l4 4-4 4',
  phone:
    'M6.6 2.9l3 5-1.9 2.2a12.5 12.5 0 0 0 6.2 6.2l2.2-1.9 5 3c-.5 2.3-2.1 3.7-4.2 3.7C9.6 21.1 2.9 14.4 2.9 7.1c0-2.1 1.4-3.7 3.7-4.2z',
  check: 'M4 12.5l5.5 5.5L20 6.5',
  close: 'M5 5l14 14M19 5L5 19',
  plus: 'M12 4v16M4 12h16',
  minus: 'M4 12h16',
  back: 'M15 4l-8 8 8 8',
  next: 'M9 4l8 8-8 8',
  more: 'M5 12h.01M12 12h.01M19 12h.01',
  undo: 'M4 9h10a6 6 0 0 1 0 12h-3M4 9l5-5M4 9l5 5',
  lock: 'M5 11h14v10H5zM8 11V8a4 4 0 0 1 8 0v3',
  hourglass: 'M6 3h12M6 21h12M7 3c0 5 5 6 5 9s-5 4-5 9M17 3c0 5-5 6-5 9s5 4 5 9',
  rush: 'M5 5l7 7-7 7M12 5l7 7-7 7',
  sun: 'M12 8a4 4 0 1 0 0 8 4 4 0 0 0 0-8zM12 2v2M12 20v2M2 12h2M20 12h2M5 5l1.4 1.4M17.6 17.6L19 19M5 19l1.4-1.4M17.6 6.4L19 5',
  moon: 'M20 14.5A8.5 8.5 0 0 1 9.5 4a8.5 8.5 0 1 0 10.5 10.5z',
  system: 'M3 4h18v12H3zM8 20h8M12 16v4',
  person: 'M12 3a4.5 4.5 0 1 0 0 9 4.5 4.5 0 0 0 0-9zM3.5 21c.8-4 4.2-6 8.5-6s7.7 2 8.5 6',
  mail: 'M3 5h18v14H3zM3 6l9 7 9-7',
  text: 'M4 4h16v12h-9l-5 4v-4H4zM8 8.5h8M8 12h5',
  pin: 'M12 2.5a7 7 0 0 1 7 7c0 5-7 12-7 12s-7-7-7-12a7 7 0 0 1 7-7zM12 7a2.5 2.5 0 1 0 0 5 2.5 2.5 0 0 0 0-5z',
  gate: 'M4 21V4M20 21V4M4 7h16M4 21h16M4 7l16 14M20 7L4 21',
  rail: 'M2 5h20M8 5v4M16 5v4M5 11l3-2 3 2v9H5zM13 11l3-2 3 2v9h-6z',
  signOut: 'M11 4H5v16h6M10 12h10M16 8l4 4-4 4',
} as const;
export type IconName = keyof typeof ICON_SHAPES;
