/**
 * The container formats that are read, as libavformat names them: those that hold coded pictures with a time each. Raw
 * elementary streams are left out since their times would be invented.
 */
export const READABLE_FORMATS = [
  'mov,mp4,m4a,3gp,3g2,mj2',
  'matroska,webm',
  'avi',
  'mpegts',
  'mxf',
  'asf',
  'concat',
  'png_pipe',
  'tiff_pipe',
].join(',');

/** Check sums that a file carries (PNG, FFV1) are checked: libavcodec's `err_detect`. */
export const CHECKS = 'crccheck';
