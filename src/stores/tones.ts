/** Tones told apart by number and pitch: urgent three rising, high two, no contact one low. */
export type ToneName = 'urgent' | 'high' | 'noContact'

/** Hz, seconds after the start, seconds long. */
const tones: Record<ToneName, { pitch: number; at: number; long: number }[]> = {
  urgent: [
    { pitch: 660, at: 0, long: 0.28 },
    { pitch: 880, at: 0.34, long: 0.28 },
    { pitch: 1175, at: 0.68, long: 0.42 },
  ],
  high: [
    { pitch: 740, at: 0, long: 0.32 },
    { pitch: 740, at: 0.46, long: 0.42 },
  ],
  noContact: [{ pitch: 294, at: 0, long: 0.9 }],
}

const loudness = 0.32
/** A tone that begins or ends at once clicks. */
const edge = 0.02

export function playTones(context: AudioContext, name: ToneName): void {
  for (const { pitch, at, long } of tones[name]) {
    const start = context.currentTime + 0.03 + at
    const gain = context.createGain()
    gain.gain.setValueAtTime(0, start)
    gain.gain.linearRampToValueAtTime(loudness, start + edge)
    gain.gain.setValueAtTime(loudness, start + long - edge)
    gain.gain.linearRampToValueAtTime(0, start + long)
    const oscillator = context.createOscillator()
    oscillator.type = 'triangle'
    oscillator.frequency.value = pitch
    oscillator.connect(gain).connect(context.destination)
    oscillator.start(start)
    oscillator.stop(start + long + edge)
  }
}
