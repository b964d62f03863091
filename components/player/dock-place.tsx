"use client";

import { useEffect } from "react";
import { Dock, dockPlaces } from "./dock";

/** The head of the working table, where the player docks on a wide screen. Page sets it. */
export function DockPlace() {
  useEffect(() => dockPlaces.open(), []);
  return <Dock place="table" />;
}
