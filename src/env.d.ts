/// <reference types="astro/client" />

declare namespace App {
  interface Locals {
    /** Names this request in the log. */
    requestId: string;
    clientAddress: string;
    person: import('~/server/request-scope').SignedIn | null;
    org: import('~/server/request-scope').OrgInfo | null;
    tournament: import('~/server/request-scope').TournamentInfo | null;
    scope: import('~/server/scope').Scope | null;
    /** What a refused page says; read by the error pages. */
    refusal: import('~/server/problem').Problem | null;
    /**
     * Set by a public page whose bytes are the same for everybody: the server keeps and sends them
     * again until one of the topics is announced or the moment has come.
     */
    keepBytes: { topics: string[]; until: Date | null } | null;
  }
}
