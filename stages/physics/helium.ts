/** Liquid ⁴He and its vapour along the saturation line, one property a file; gathered here for those who want all. */
export * from "./density.js";
export * from "./latent-heat.js";
export * from "./saturation.js";
export * from "./sound.js";
export * from "./vapour-pressure.js";
export * from "./virial.js";
