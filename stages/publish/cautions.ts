/** What whoever cools, fills, heats or warms the cell must bear in mind. It replaces no rule of the site. */
export const CAUTIONS: readonly string[] = [
  "Cryogens: one litre of liquid helium becomes about 750 litres of gas and pushes the air out of a room. Work with ventilation and an oxygen monitor, wear eye and hand protection, and never alone.",
  "Cold burns: bare skin freezes to metal and to cold vapour in seconds. Keep liquid and vapour away from skin, eyes and clothing.",
  "Sealed cells: a cell filled cold holds gas at hundreds of bar, a thousand and more if it was full, once warm, unless its relief works. Warm it only with the fill line open to a relief device that is rated, tested and free of ice.",
  "Vacuum and pressure vessels: a leak into a vacuum space boils when it warms. Each closed space that can hold liquid wants a relief of its own; blocked necks and ice plugs are emergencies.",
  "Heaters: limit current and time in hardware. A heater left on, or on in vacuum without liquid, can burn out, melt joints or boil the bath.",
  "These are reminders, not instructions. The site's cryogen and pressure rules, local codes and the advice of licensed practitioners come first.",
];
