import { defineStore } from 'pinia'
import { computed, markRaw, ref, shallowRef, toRaw } from 'vue'

/** What Nuxt imports by itself and the stores use, for tests that load a store without Nuxt. Import before the store. */
Object.assign(globalThis, { defineStore, computed, markRaw, ref, shallowRef, toRaw })
