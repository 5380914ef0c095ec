import { FEED_PATTERNS, type FeedPattern } from '../../sweep/setting'
import { Forecast } from './Forecast'
import { type EditorProps, marking, Problem, Row } from './field'

const PATTERNS: Readonly<Record<FeedPattern, readonly [string, string]>> = {
  uniform: ['uniform', 'each word drawn by itself from its legal range'],
  sorted: ['sorted', 'uniform words in rising order'],
  reversed: ['reversed', 'uniform words in falling order'],
  equal: ['equal', 'one word throughout'],
  permutation: ['permutation', 'consecutive words in random order'],
}

/** How input is made: pattern, trials, seed. */
export function InputEditor({ text, problems, setting, focus, onChange }: EditorProps) {
  return (
    <>
      <Row label="Keys">
        <div className="options stacked">
          {FEED_PATTERNS.map(pattern => (
            <label key={pattern} className="option">
              <input
                type="radio"
                name="pattern"
                checked={text.pattern === pattern}
                data-first={focus === 'feed' && text.pattern === pattern ? '' : undefined}
                onChange={() => onChange({ ...text, pattern })}
              />
              <span>
                {PATTERNS[pattern][0]} <small>{PATTERNS[pattern][1]}</small>
              </span>
            </label>
          ))}
        </div>
      </Row>
      <Row label="Trials">
        <input
          type="text"
          className="figure"
          inputMode="numeric"
          aria-label="Trials at each point"
          value={text.trials}
          size={6}
          autoComplete="off"
          data-first={focus === 'trials' ? '' : undefined}
          {...marking(problems, 'trials')}
          onChange={event => onChange({ ...text, trials: event.currentTarget.value })}
        />
        <Problem problems={problems} field="trials" />
      </Row>
      <Row label="Seed">
        <input
          type="text"
          className="figure"
          inputMode="numeric"
          aria-label="Master seed"
          value={text.seed}
          size={12}
          autoComplete="off"
          {...marking(problems, 'seed')}
          onChange={event => onChange({ ...text, seed: event.currentTarget.value })}
        />
        <Problem problems={problems} field="seed" />
        <p className="remark">The same seed gives the same words, here and in the command.</p>
      </Row>
      <Forecast setting={setting} />
    </>
  )
}
