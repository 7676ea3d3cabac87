/** Irregular forms that a stemmer cannot know, towards the plain verb. "Left" and "found" are left alone: they mean other things too often. */
const FORMS = `glued gluing glueing > glue
drew drawn > draw
bent > bend
held > hold
stuck > stick
sawn sawed > saw
laid lain lays > lay
built > build
hung > hang
took taken > take
swept > sweep
wound > wind
ground > grind
drove driven > drive
wrote written > write
chosen chose > choose
broke broken > break
torn tore > tear
thickened thickening > thicken
tied tying ties > tie
dried drying dries > dry
dyed dyeing > dye
feet > foot
inches > inch
knives > knife
halves > half
chines > chine
vices vise vises > vice
marking markings > mark
measurement measurements measuring > measure`

/** British and American spellings of the same thing, towards one of them. */
const PAIRS = `mould > mold
moulds > molds
moulded > molded
centre > center
centres > centers
centred > centered
centreline > centerline
fibre > fiber
fibreglass > fiberglass
colour > color
colours > colors
coloured > colored
grey > gray
metre > meter
metres > meters
millimetre > millimeter
millimetres > millimeters
aluminium > aluminum
gunnel > gunwale
gunnels > gunwales
oarlock > rowlock
oarlocks > rowlocks
plywood > ply
cleanup > clean
inwales > inwale`

function read(table: string): Map<string, string> {
  return new Map(table.split('\n').flatMap((line) => {
    const [forms, base] = line.split(' > ') as [string, string]
    return forms.split(' ').map(form => [form, base] as const)
  }))
}

export const IRREGULAR: ReadonlyMap<string, string> = read(FORMS)
export const SPELLINGS: ReadonlyMap<string, string> = read(PAIRS)
