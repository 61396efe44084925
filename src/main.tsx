import { createRoot } from 'react-dom/client'
import './styles/tokens.css'
import './styles/base.css'
import './styles/bench.css'
import { AppProvider } from './ui/bridge/app-context.tsx'
import { appModel } from './ui/bridge/app-model.ts'
import { App } from './ui/shell/app.tsx'

const root = document.getElementById('root')
if (root === null) throw new Error('index.html has no element with id root')

const model = await appModel(
  () => new Worker(new URL('./worker/host/analysis-worker.ts', import.meta.url), { type: 'module' }),
)
createRoot(root).render(
  <AppProvider model={model}>
    <App />
  </AppProvider>,
)
model.conductor.refresh()
