/// <reference types="astro/client" />

declare namespace App {
  /** What the Express layer hands to every page and endpoint. */
  interface Locals {
    user: import('./server/policies/actor').Actor | null;
    ip: string;
    signIn(email: string, password: string, remember: boolean): Promise<{ ok: true } | { ok: false; message: string }>;
    signInAs(userId: number): Promise<void>;
    signOut(): Promise<void>;
  }
}
