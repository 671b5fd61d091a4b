import type { Process } from '#shared/schemas/benches'
import type { Aim } from '#shared/schemas/curves'
import type { FilmFormat } from '#shared/schemas/negatives'
import type { PictureNote } from '#shared/schemas/picture-formats'

/** How the screens say the contract's words. Records, so that a new word cannot be forgotten. */
export const processNames: Record<Process, string> = {
  'cyanotype': 'Cyanotype', 'van-dyke': 'Van Dyke brown', 'salt': 'Salt print', 'kallitype': 'Kallitype',
  'platinum-palladium': 'Platinum/palladium', 'gum': 'Gum', 'carbon': 'Carbon', 'other': 'Another process',
}

/** Processes that have a starting curve; carbon and what we don't know need a bench that has been measured. */
export const startingProcesses: Process[] = ['cyanotype', 'van-dyke', 'salt', 'kallitype', 'platinum-palladium', 'gum']

export const printColours: Record<Process, string> = {
  'cyanotype': 'blue', 'van-dyke': 'brown', 'salt': 'red-brown', 'kallitype': 'warm black',
  'platinum-palladium': 'neutral black', 'gum': 'pigment black', 'carbon': 'deep black', 'other': 'black',
}

export const aimNames: Record<Aim, string> = { 'even-lightness': 'Even lightness', 'keep-middle-tones': 'Keep middle tones', 'even-density': 'Even density' }
export const aimSays: Record<Aim, string> = {
  'even-lightness': 'Every step of the photo gives an equal step in the print. Prints come out lighter than the photo in the middle.',
  'keep-middle-tones': 'The middle stays where it is in the photo; the ends give way.',
  'even-density': 'Equal steps of density. Middle and light tones come out a little darker than with even lightness.',
}

/** What is left out of a photo that holds more than one still picture can show. */
export const noteSays: Record<PictureNote, string> = {
  gain_map: 'The brightness map for HDR screens; the picture beneath it is used',
  several_pictures: 'All pictures of the file but the first',
  motion: 'The film that belongs to it; the still picture is used',
  animation: 'All frames but the first',
}

export const formatNames: Record<FilmFormat, string> = { pdf: 'PDF', tiff: 'TIFF', png: 'PNG' }
export const formatSays: Record<FilmFormat, string> = {
  pdf: 'Its page is exactly the film’s size. For any program that prints PDF.',
  tiff: '16 bit. For programs that place pictures by their resolution.',
  png: '16 bit, the same pixels as the TIFF.',
}
