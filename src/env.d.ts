/// <reference path="../.astro/types.d.ts" />

declare namespace App {
  interface Locals {
    services: import('./server/services').Services;
    user: import('./commission/permissions').Actor;
    /** Random id of this browser, in a cookie; ties a guest's uploads and refused forms to it. */
    browserId: string;
    /** Why a page was refused, for the page that says so. */
    turnedAway?: import('./commission/problem').Problem;
  }
}
