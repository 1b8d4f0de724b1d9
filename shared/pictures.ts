/** Kinds of picture that a sheet may hold, known by their first bytes and never by what the sender says. SVG is a program and is not one. */
export const PICTURE_TYPES = ['image/png', 'image/jpeg', 'image/webp', 'image/gif'] as const
export type PictureType = typeof PICTURE_TYPES[number]

/** Largest picture, in bytes. */
export const PICTURE_SIZE = 10 * 1024 * 1024
