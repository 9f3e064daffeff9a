/// <reference types="astro/client" />

declare namespace App {
  interface Locals {
    /** Names this request in logs and in what a person is told when something breaks. */
    requestId: string;
    /** Who is asking. */
    actor: import('#server/accounts/actor.ts').Actor;
    /** The units to show lengths in. */
    units: import('#lib/plan/types.ts').UnitSystem;
  }
}
