"use client";

import { createContext, useContext } from "react";

/** Whether the person has tried to leave this step: until then a row that was only just added shows no errors. */
export const TriedContext = createContext(false);
export const useTried = (): boolean => useContext(TriedContext);
