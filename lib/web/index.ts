export { type ActionResult, action } from "./action";
export { clientAddress } from "./client-address";
export { contentSecurityPolicy } from "./content-security-policy";
export { type RouteContext, route } from "./route";
export { roleCookieName, type Viewer, viewer } from "./viewer";
export { webhook } from "./webhook";
