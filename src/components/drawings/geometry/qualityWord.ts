/** The word for a QARTOD flag. */
import type { QualityFlag } from '../../../../shared/schemas/estimate.ts'

const words: Record<QualityFlag, string> = { 1: 'Good', 2: 'Not evaluated', 3: 'Suspect', 4: 'Fail', 9: 'Missing' }

export const qualityWord = (flag: QualityFlag): string => words[flag]
