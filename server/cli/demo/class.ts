import { accessTo, type StudioAccess } from '../../services/access'
import { openClass } from '../../services/classes'
import { handIn } from '../../services/hand-ins'
import { joinClass } from '../../services/joining'
import { makeNegative, orderFilms, sendPhoto, type Picture } from './pictures'

/** Long enough to be there when somebody looks around a month later. */
const days = 90

/** A class with a student at each step: joined, with a photo, a negative, a film, and handed in. */
export async function openClassWithStudents(teacher: StudioAccess, benchId: string): Promise<void> {
  const { item } = await openClass(teacher, { name: 'Cyanotype in four evenings', endsAt: new Date(Date.now() + days * 86_400_000).toISOString() })
  const join = async (firstName: string): Promise<StudioAccess> => {
    const { user } = await joinClass({ roomCode: item.roomCode!, firstName })
    return (await accessTo(user.id, teacher.id))!
  }
  const printOf = async (student: StudioAccess, picture: Picture, widthMm: number, heightMm: number) =>
    makeNegative(student, await sendPhoto(student, picture), { benchId, size: { widthMm, heightMm } })

  const [, levi, noor, pia, juno] = [await join('Malik'), await join('Levi'), await join('Noor'), await join('Pia'), await join('Juno')]
  await sendPhoto(levi!, 'rope-coil')
  await printOf(noor!, 'brick-light', 120, 160)
  await orderFilms(pia!, await printOf(pia!, 'bottles', 160, 128), ['pdf'])
  const handedIn = await printOf(juno!, 'rope-walk', 128, 160)
  await orderFilms(juno!, handedIn, ['pdf'])
  await handIn(juno!, handedIn)
}
