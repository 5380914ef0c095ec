import { useState } from 'react'
import { CHARGES, type ChargesName } from '../../machine/machine'
import { type ChargedClass, OPERATION_CLASSES } from '../../routine/block'
import { parseCharges, printCharges } from '../../sweep/charges'
import { type EditorProps, marking, Problem, Row } from './field'

const CLASSES: readonly ChargedClass[] = [...OPERATION_CLASSES, 'index']

const PRESETS: readonly (readonly [ChargesName, string, string])[] = [
  ['unit', 'unit', 'every operation 1'],
  ['operators', 'operators', 'moves, compares, jumps, calls 0: how bit-trick collections count'],
]

type Prices = Readonly<Record<ChargedClass, string>>

/** Prices as charges are written; one that is no price is written out, so that it is told where it stands. */
function writePrices(prices: Prices): string {
  const written = CLASSES.map(name => `${name} = ${prices[name].trim() || '?'}`).join(', ')
  const read = parseCharges(written)
  return 'charges' in read ? printCharges(read.charges) : written
}

function pricesOf(text: string): Prices {
  const read = parseCharges(text)
  const charges = 'charges' in read ? read.charges : CHARGES.unit
  return Object.fromEntries(CLASSES.map(name => [name, String(charges[name])])) as Prices
}

/** What an operation of each class costs. */
export function ChargesEditor({ text, problems, onChange }: EditorProps) {
  const [prices, setPrices] = useState(() => pricesOf(text.charges))
  function put(next: Prices) {
    setPrices(next)
    onChange({ ...text, charges: writePrices(next) })
  }
  const isPrice = (price: string) => /^\d+$/.test(price.trim()) && Number.isSafeInteger(Number(price))
  return (
    <>
      <Row label="Charges">
        <div className="options stacked">
          {PRESETS.map(([name, word, what], place) => (
            <label key={name} className="option">
              <input
                type="radio"
                name="charges"
                checked={text.charges === name}
                data-first={text.charges === name || (place === 0 && !(text.charges in CHARGES)) ? '' : undefined}
                onChange={() => put(pricesOf(name))}
              />
              <span>
                {word} <small>{what}</small>
              </span>
            </label>
          ))}
          <label className="option">
            <input
              type="radio"
              name="charges"
              checked={!(text.charges in CHARGES)}
              readOnly
              disabled={text.charges in CHARGES}
            />
            <span>
              a table of your own <small>change a price below</small>
            </span>
          </label>
        </div>
      </Row>
      <Row label="Prices">
        <div className="prices">
          {CLASSES.map(name => (
            <label key={name} className="price">
              <span>{name}</span>
              <input
                type="text"
                className="figure"
                inputMode="numeric"
                value={prices[name]}
                size={5}
                autoComplete="off"
                {...(isPrice(prices[name]) ? {} : marking(problems, 'charges'))}
                onChange={event => put({ ...prices, [name]: event.currentTarget.value })}
              />
            </label>
          ))}
        </div>
        <Problem problems={problems} field="charges" />
        <p className="remark">
          A price is a whole number from 0. <i>index</i> prices the addition inside a base-plus-index access. Runs
          are counted once: new prices weigh them again. Counts are not cycles or seconds.
        </p>
      </Row>
    </>
  )
}
