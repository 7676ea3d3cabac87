interface Question {
  title: string
  /** What will happen and what is kept. */
  message: string
  /** The verb on the button: "Delete clip". */
  action: string
  /** The other button; "Keep it" unless something else is meant. */
  keep?: string
  danger?: boolean
  /** Must be typed before the button works, for what cannot be undone. */
  typed?: string
  /** What is typed: "the name" unless something else is meant. */
  typedWhat?: string
}

/** Asks before something is destroyed: `if (await confirm({ … }))`. The dialog lives in the layout. */
export function useConfirm() {
  const question = useState<Question | null>('confirm-question', () => null)
  function confirm(asked: Question): Promise<boolean> {
    answers.resolve?.(false)
    question.value = asked
    return new Promise(resolve => answers.resolve = resolve)
  }
  function answer(yes: boolean) {
    question.value = null
    answers.resolve?.(yes)
    answers.resolve = undefined
  }
  return { question, confirm, answer }
}

const answers: { resolve?: (yes: boolean) => void } = {}
