import { type DragEvent, type ReactNode, useRef, useState } from 'react'
import type { ImportAnswer } from '../../core/read/import-answer.ts'
import type { Preview } from '../../core/read/import-preview.ts'
import { useApp } from '../bridge/app-context.tsx'
import { Button } from '../controls/button.tsx'
import { Sheet } from '../controls/sheet.tsx'
import { openRecord } from './open-record.ts'
import { openFigure } from './open-figure.ts'
import { isSessionFile, openSessionFile } from './open-session.ts'
import { ImportSheet } from './import-sheet.tsx'

interface Incoming {
  readonly take: (files: readonly File[]) => void
  readonly dragOver: (event: DragEvent) => void
  readonly dragLeave: (event: DragEvent) => void
  readonly drop: (event: DragEvent) => void
  readonly element: ReactNode
}

interface Asking {
  readonly file: File
  readonly preview: Preview
}

/** Files on their way in: records are previewed and read, session files and exported figures opened. */
export function useIncoming(): Incoming {
  const app = useApp()
  const [over, setOver] = useState(false)
  const [asking, setAsking] = useState<Asking | null>(null)
  const [waiting, setWaiting] = useState(0)
  const [progress, setProgress] = useState<number | null>(null)
  const [problem, setProblem] = useState<string | null>(null)
  const [said, setSaid] = useState<readonly string[]>([])
  const queue = useRef<File[]>([])
  const stopper = useRef<AbortController | null>(null)

  const say = (sentences: readonly string[]): void => {
    if (sentences.length > 0) setSaid((before) => [...before, ...sentences])
  }

  const next = async (): Promise<void> => {
    const file = queue.current.shift()
    setWaiting(queue.current.length)
    setProgress(null)
    setProblem(null)
    if (file === undefined) {
      setAsking(null)
      return
    }
    if (/\.svg$/i.test(file.name)) {
      say([await openFigure(app, file)])
      return next()
    }
    if (await isSessionFile(file)) {
      say([await openSessionFile(app, file)])
      return next()
    }
    const outcome = await app.client.run('preview', (service) => service.previewFile(file, file.name))
    if (!outcome.ok) {
      say([outcome.sentence])
      return next()
    }
    const preview = outcome.value
    const remembered = app.choices.store.getState().session.importAnswers[preview.shapeSignature]
    if (preview.problem === null && remembered !== undefined) {
      setAsking({ file, preview: { ...preview, answer: remembered, questions: [] } })
      await read(file, preview, remembered)
      return
    }
    setAsking({ file, preview })
  }

  const read = async (file: File, preview: Preview, answer: ImportAnswer): Promise<void> => {
    const aborter = new AbortController()
    stopper.current = aborter
    setProgress(0)
    setProblem(null)
    const outcome = await openRecord(app, file, preview.shapeSignature, answer, setProgress, aborter.signal)
    setProgress(null)
    if (!outcome.ok) {
      if (outcome.stopped !== true) setProblem(outcome.sentence)
      return
    }
    say(outcome.value)
    await next()
  }

  const take = (files: readonly File[]): void => {
    queue.current.push(...files)
    setWaiting(queue.current.length)
    if (asking === null) void next()
  }

  return {
    take,
    dragOver(event) {
      if (![...event.dataTransfer.types].includes('Files')) return
      event.preventDefault()
      setOver(true)
    },
    dragLeave(event) {
      if (event.relatedTarget === null) setOver(false)
    },
    drop(event) {
      event.preventDefault()
      setOver(false)
      take([...event.dataTransfer.files])
    },
    element: (
      <>
        {over ? <div className="drop-veil">Drop records, a session file or an exported figure</div> : null}
        {asking === null ? null : (
          <ImportSheet
            key={asking.file.name + String(asking.file.lastModified) + String(asking.preview.answer !== null)}
            preview={asking.preview}
            waiting={waiting}
            progress={progress}
            problem={problem}
            onOpen={(answer) => void read(asking.file, asking.preview, answer)}
            onStop={() => stopper.current?.abort()}
            onClose={() => {
              stopper.current?.abort()
              void next()
            }}
          />
        )}
        {said.length > 0 && asking === null ? (
          <Sheet
            title="Opened"
            onClose={() => setSaid([])}
            foot={
              <Button look="primary" onClick={() => setSaid([])}>
                Close
              </Button>
            }
          >
            <ul>
              {said.map((sentence) => (
                <li key={sentence}>{sentence}</li>
              ))}
            </ul>
          </Sheet>
        ) : null}
      </>
    ),
  }
}
