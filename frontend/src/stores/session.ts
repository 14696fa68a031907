import {
  may,
  type Action,
  type Farm,
  type Membership,
  type Role,
  type Session,
  type SignIn,
  type SignUp,
} from '@maslin/shared'
import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import * as auth from '../api/auth'
import { ApiError } from '../api/client'
import { forgetRenewal, noteRenewal } from '../api/refresh'

/** Tells a visitor from someone whose cookie may still hold, so that the landing page asks the API nothing. Holds no secret. */
const HINT = 'maslin.signedIn'
const LAST_FARM = 'maslin.lastFarm'

/** Who is signed in, on which farms, and which of them is on the page. */
export const useSessionStore = defineStore('session', () => {
  const session = shallowRef<Session>()
  const known = ref(false)
  const farmId = ref<string>()

  const user = computed(() => session.value?.user)
  const memberships = computed<readonly Membership[]>(() => session.value?.memberships ?? [])
  const membership = computed(() => memberships.value.find((one) => one.farm.id === farmId.value))
  const farm = computed<Farm | undefined>(() => membership.value?.farm)
  const role = computed<Role | undefined>(() => membership.value?.role)
  const reviewsSomewhere = computed(() => memberships.value.some((one) => may(one.role, 'scenarios.review')))

  function take(next: Session): void {
    session.value = next
    known.value = true
    localStorage.setItem(HINT, '1')
  }

  function forget(): void {
    forgetRenewal()
    session.value = undefined
    known.value = true
    farmId.value = undefined
    localStorage.removeItem(HINT)
  }

  /** Asks once who is signed in. @throws {ApiError} where the API does not answer; being signed out is no error. */
  async function load(): Promise<void> {
    if (known.value) return
    try {
      take(await auth.fetchSession())
    } catch (error) {
      if (!(error instanceof ApiError) || error.status !== 401) throw error
      forget()
    }
  }

  /** Asks again, after something about the person's farms has changed. */
  async function reload(): Promise<void> {
    take(await auth.fetchSession())
  }

  const mayBeSignedIn = () =>
    known.value ? session.value !== undefined : localStorage.getItem(HINT) !== null

  async function signIn(body: SignIn): Promise<void> {
    take(await auth.signIn(body))
    noteRenewal()
  }

  async function signUp(body: SignUp): Promise<void> {
    take(await auth.signUp(body))
    noteRenewal()
  }

  async function signOut(): Promise<void> {
    await auth.signOut()
    forget()
  }

  /** Puts a farm on the page. @returns false where the person is no member of it. */
  function enter(id: string): boolean {
    if (!memberships.value.some((one) => one.farm.id === id)) return false
    farmId.value = id
    localStorage.setItem(LAST_FARM, id)
    return true
  }

  /** The farm to open first: the last one seen, else the first. */
  const homeFarmId = computed(() => {
    const last = localStorage.getItem(LAST_FARM)
    return (memberships.value.find((one) => one.farm.id === last) ?? memberships.value[0])?.farm.id
  })

  /** Replaces what is known about a farm, after it was changed. */
  function updateFarm(next: Farm): void {
    if (!session.value) return
    session.value = {
      ...session.value,
      memberships: session.value.memberships.map((one) =>
        one.farm.id === next.id ? { ...one, farm: next } : one,
      ),
    }
  }

  const can = (action: Action): boolean => role.value !== undefined && may(role.value, action)

  return {
    session, known, user, memberships, membership, farm, farmId, role, reviewsSomewhere, homeFarmId,
    load, reload, mayBeSignedIn, signIn, signUp, signOut, forget, enter, updateFarm, can,
  } // prettier-ignore
})
