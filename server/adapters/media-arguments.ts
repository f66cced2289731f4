/**
 * Argument lists for ffmpeg and ffprobe. Pure: lists in, lists out, no shell anywhere.
 *
 * `-protocol_whitelist file` alone does not keep ffmpeg from the network: a manifest that names other files is a
 * format, so formats are an allow-list too, and the cage (media-cage.ts) takes the network away besides.
 */

/** Pictures above this are refused before they are decoded. 4096 x 2160 fits. */
export const MAX_PIXELS = 9_000_000
const MAX_ALLOC_BYTES = 268_435_456
const PROBE_BYTES = 10_000_000

const FORMATS = 'mov,matroska'
export const VIDEO_DECODERS = ['h264', 'hevc', 'vp8', 'vp9', 'libdav1d', 'mpeg4', 'mjpeg'] as const
/** Sound and subtitles are never decoded for us, but ffprobe gives up on a file when it may not open their decoders. */
const PROBE_AUDIO_DECODERS = 'aac,opus,pcm_s16le,pcm_s16be,mp3float,vorbis,amrnb,amrwb,alac,ac3,flac'
const PROBE_TEXT_DECODERS = 'mov_text,srt,subrip,ass,webvtt'

const READ_FILES_ONLY = ['-protocol_whitelist', 'file', '-format_whitelist', FORMATS]
const BOUNDS = ['-max_pixels', String(MAX_PIXELS), '-max_alloc', String(MAX_ALLOC_BYTES)]

/** ffprobe parses first and is as exposed as ffmpeg: the same bounds. */
export function probeArguments(file: string): string[] {
  return [
    '-hide_banner', '-v', 'error', ...READ_FILES_ONLY, ...BOUNDS,
    '-codec_whitelist:v', VIDEO_DECODERS.join(','), '-codec_whitelist:a', PROBE_AUDIO_DECODERS, '-codec_whitelist:s', PROBE_TEXT_DECODERS,
    '-probesize', String(PROBE_BYTES),
    '-show_entries', 'format=nb_streams,duration:stream=index,codec_type,codec_name,width,height,sample_aspect_ratio,avg_frame_rate,duration,nb_frames,color_transfer:stream_disposition=attached_pic:stream_side_data=rotation',
    '-of', 'json=compact=1', '-i', `file:${file}`,
  ]
}

/** The packets of our own review copy in order: time stamp, place in the file, whether a key frame. */
export function packetArguments(file: string): string[] {
  return [
    '-hide_banner', '-v', 'error', ...READ_FILES_ONLY, ...BOUNDS, '-codec_whitelist', 'h264',
    '-select_streams', 'v:0', '-show_entries', 'packet=pts,duration,pos,flags', '-of', 'csv=print_section=0', '-i', `file:${file}`,
  ]
}

/** The beginning of every ffmpeg call on a file that someone else made; damage ends it (`-xerror`, `explode`). */
export function strictInput(file: string, threads: number, decoders: readonly string[] = VIDEO_DECODERS): string[] {
  return [
    '-nostdin', '-hide_banner', '-v', 'error', '-y', '-xerror', '-err_detect', 'explode', ...READ_FILES_ONLY,
    '-codec_whitelist', decoders.join(','), ...BOUNDS, '-threads', String(threads), '-i', `file:${file}`,
  ]
}
