/** Where a page wants its tables of figures: below all drawings on wide screens, else below each drawing. */
import type { InjectionKey, Ref } from 'vue'

export const figuresHost: InjectionKey<Readonly<Ref<HTMLElement | null>>> = Symbol('figuresHost')
