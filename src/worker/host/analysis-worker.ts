import { expose } from 'comlink'
import { analysisService } from './analysis-service.ts'

expose(analysisService())
