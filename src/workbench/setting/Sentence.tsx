import { Fragment, type ReactNode } from 'react'
import type { Charges, InstructionSetName, OffPolicy } from '../../machine/machine'
import type { SizeRange, WidthChoice } from '../../sweep/setting'
import { printWidth } from '../../sweep/widths'
import { SizeValue } from '../marks/Count'
import { DashKey, MarkerKey } from '../marks/Marker'
import { type RoutineShape, type SettingParts, type SettingText, sizeText } from '../store/setting-text'
import { Slot } from './Slot'
import { PATTERN_WORDS, readCharges, readRange, SET_ORDER } from './sentence-parts'

export const SLOTS = ['widths', 'sets', 'charges', 'sizes', 'feed', 'trials'] as const
export type SlotName = (typeof SLOTS)[number]

export interface SentenceProps {
  readonly shape: RoutineShape
  /** What is written; shown where it cannot be read. */
  readonly text: SettingText
  /** What it comes to, as far as it can be read. */
  readonly parts: SettingParts
  /** Slots whose editor is open. */
  readonly open: readonly SlotName[]
  /** The routine uses a class that a picked set lacks, so that what becomes of it belongs to the sentence. */
  readonly leansOnOff: boolean
  readonly onOpen: (slot: SlotName) => void
}

/** The setting as the sentence that opens a theorem. It is the legend of every figure as well. */
export function Sentence({ shape, text, parts, open, leansOnOff, onOpen }: SentenceProps) {
  function slot(name: SlotName, opens: string, children: ReactNode): ReactNode {
    return (
      <Slot id={`slot-${name}`} opens={opens} isOpen={open.includes(name)} onOpen={() => onOpen(name)}>
        {children}
      </Slot>
    )
  }
  const sized = shape.sizes.length > 0
  return (
    <p className="sentence">
      <b className="run-in">Setting.</b> On a word-RAM with{' '}
      {slot(
        'widths',
        'change the word width',
        parts.widths ? <Widths widths={parts.widths} /> : <>w = {text.widths}</>,
      )}
      ,{' '}
      {slot(
        'sets',
        'change the instruction sets',
        <Sets sets={text.sets} off={leansOnOff ? text.off : undefined} />,
      )}
      ,{' '}
      <ChargesPart
        charges={parts.charges}
        written={text.charges}
        slot={part => slot('charges', 'change the charges', part)}
      />
      {(sized || shape.lets.length > 0) && (
        <>
          , {sized ? 'for ' : 'with '}
          {slot(
            'sizes',
            sized ? 'change sizes and lets' : 'change lets',
            <Sizes shape={shape} text={text} parts={parts} />,
          )}
        </>
      )}
      , on {slot('feed', 'change the input pattern', PATTERN_WORDS[text.pattern])},{' '}
      {slot('trials', 'change trials and seed', <Trials trials={text.trials} seed={text.seed} />)}.
    </p>
  )
}

/** Items with what joins them. */
function join(items: readonly ReactNode[], between: ReactNode, last: ReactNode = between): ReactNode {
  return items.map((item, place) => (
    // biome-ignore lint/suspicious/noArrayIndexKey: the place is all that an item is known by
    <Fragment key={place}>
      {place > 0 && (place === items.length - 1 ? last : between)}
      {item}
    </Fragment>
  ))
}

function Widths({ widths }: { readonly widths: readonly WidthChoice[] }) {
  return (
    <>
      <i>w</i> ={' '}
      {join(
        widths.map((choice, place) => (
          <span className="together" key={printWidth(choice)}>
            <MarkerKey width={place} set="full" />
            {choice.kind === 'fixed' ? choice.width : <code>{choice.text}</code>}
          </span>
        )),
        ', ',
      )}
    </>
  )
}

const SET_PHRASES: Readonly<Record<InstructionSetName, string>> = {
  full: 'with multiplication',
  'no-multiply': 'without multiplication',
  'add-only': 'by addition alone',
  extended: 'with every class',
}

const OFF_PHRASES: Readonly<Record<OffPolicy, string>> = {
  expand: 'expanded where off',
  refuse: 'refused where off',
}

function Sets(props: { readonly sets: readonly InstructionSetName[]; readonly off: OffPolicy | undefined }) {
  const { sets, off } = props
  if (sets.length === 0) return <>no instruction set</>
  const both = sets.includes('full') && sets.includes('no-multiply')
  const phrases = SET_ORDER.filter(set => sets.includes(set)).map(set => (
    <span className="together" key={set}>
      <DashKey set={set} />
      {both && set === 'full' ? 'with' : SET_PHRASES[set]}
    </span>
  ))
  return (
    <>
      {join(phrases, sets.length > 2 ? ', ' : ' and ', ' and ')}
      {off && `, ${OFF_PHRASES[off]}`}
    </>
  )
}

function ChargesPart(props: {
  readonly charges: Charges | undefined
  readonly written: string
  readonly slot: (part: ReactNode) => ReactNode
}) {
  const { charges, written, slot } = props
  if (!charges) return <>operations charged {slot(written)}</>
  const reading = readCharges(charges)
  if (reading.kind === 'unit') return <>every operation charged {slot('1')}</>
  if (reading.kind === 'operators')
    return <>every operation charged {slot('1, moves, compares, jumps and calls 0')}</>
  return (
    <>
      every operation charged {slot(`1, ${reading.prices.map(([name, price]) => `${name} ${price}`).join(', ')}`)}
    </>
  )
}

function Range({ name, range }: { readonly name: string; readonly range: SizeRange }) {
  const reading = readRange(range)
  const name_ = <i>{name}</i>
  switch (reading.kind) {
    case 'doubling':
      return (
        <>
          {name_} = <SizeValue of={reading.from} /> to <SizeValue of={reading.to} />
        </>
      )
    case 'stepping':
      return (
        <>
          {name_} = <SizeValue of={reading.from} /> to <SizeValue of={reading.to} />
          {reading.by !== 1 && ` by ${reading.by}`}
        </>
      )
    case 'list':
      return (
        <>
          {name_} ={' '}
          {join(
            reading.values.map(value => <SizeValue key={value} of={value} />),
            ', ',
          )}
        </>
      )
    case 'many':
      return (
        <>
          {reading.count} values of {name_} from <SizeValue of={reading.from} /> to <SizeValue of={reading.to} />
        </>
      )
  }
}

function Sizes(props: { readonly shape: RoutineShape; readonly text: SettingText; readonly parts: SettingParts }) {
  const { shape, text, parts } = props
  const [first] = shape.sizes
  const items = [
    ...shape.sizes.map((name, place) => {
      const range = parts.sizes[name]
      if (range) return <Range key={name} name={name} range={range} />
      const written = sizeText(text, shape, place)
      return (
        <Fragment key={name}>
          <i>{name}</i> = {written === '' && place > 0 ? <i>{first}</i> : written || '…'}
        </Fragment>
      )
    }),
    ...Object.entries(parts.lets).map(([name, value]) => (
      <Fragment key={`let ${name}`}>
        <i>{name}</i> = {String(value)}
      </Fragment>
    )),
  ]
  return items.length > 0 ? join(items, ', ') : <>lets as declared</>
}

function Trials({ trials, seed }: { readonly trials: string; readonly seed: string }) {
  return (
    <>
      {trials} {trials === '1' ? 'trial' : 'trials'}
      {seed !== '1' && ` from seed ${seed}`}
    </>
  )
}
