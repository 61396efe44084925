import { createContext, type ReactNode, useContext, useSyncExternalStore } from 'react'
import { useStore } from 'zustand'
import type { Choices } from '../../state/choices/choices-store.ts'
import type { Results } from '../../state/results/results-store.ts'
import type { View } from '../../state/view/view-store.ts'
import type { SaveStatus } from '../../session/store/session-store.ts'
import type { AppModel } from './app-model.ts'

const Context = createContext<AppModel | null>(null)

export function AppProvider({ model, children }: { model: AppModel; children: ReactNode }) {
  return <Context value={model}>{children}</Context>
}

export function useApp(): AppModel {
  const model = useContext(Context)
  if (model === null) throw new Error('useApp stands outside AppProvider')
  return model
}

export function useChoices<T>(select: (choices: Choices) => T): T {
  return useStore(useApp().choices.store, select)
}

export function useResults<T>(select: (results: Results) => T): T {
  return useStore(useApp().results, select)
}

export function useView<T>(select: (view: View) => T): T {
  return useStore(useApp().view, select)
}

export function useSaveStatus(): SaveStatus {
  const model = useApp()
  return useSyncExternalStore(model.onSaveStatus, model.saveStatus)
}
