import { useState } from 'react'
import { siDuration } from '../../core/numeric/units.ts'
import type { Outcome, PlantReport } from '../../worker/protocol/service.ts'
import { useApp, useResults } from '../bridge/app-context.tsx'
import { Button } from '../controls/button.tsx'
import { NumberField } from '../controls/number-field.tsx'

/** Puts a synthetic on-time into the record and says how much of it the same choices give back. */
export function PlantEvent() {
  const app = useApp()
  const ready = useResults((results) => results.thresholds.status === 'arrived')
  const [seconds, setSeconds] = useState(30)
  const [busy, setBusy] = useState(false)
  const [report, setReport] = useState<Outcome<PlantReport> | null>(null)

  const plant = async (): Promise<void> => {
    const request = await app.conductor.request()
    const threshold = app.conductor.threshold()
    if (request === null || threshold === null) return
    setBusy(true)
    setReport(
      await app.client.run('plant', (service, job) =>
        service.plantEvent(job, request, threshold, null, seconds, `plant ${request.name} ${seconds}`),
      ),
    )
    setBusy(false)
  }
  return (
    <div className="plant">
      <NumberField
        label="Plant an on-time of"
        unit="s"
        value={seconds}
        low={0.05}
        high={3600}
        step={5}
        onChange={setSeconds}
      />
      <div className="row">
        <Button disabled={!ready || busy} onClick={() => void plant()}>
          {busy ? 'Planting …' : 'Plant an event'}
        </Button>
      </div>
      <p className="aside" aria-live="polite">
        {report === null
          ? 'Does the baseline eat long on-times here?'
          : report.ok
            ? `${siDuration(report.value.survivingSeconds)} of ${siDuration(report.value.plantedSeconds)} survive. ${report.value.message}`
            : report.sentence}
      </p>
    </div>
  )
}
