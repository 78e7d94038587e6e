import { expect, test } from "vitest";
import { loadCampaign } from "../../../pipeline/config/campaign.js";
import { loadCell, loadRun, loadSample, loadThermometer } from "../../../pipeline/config/load.js";
import { InputError } from "../../../stages/errors.js";
import { BAD_CONFIGURATIONS } from "./bad-configurations.js";
import { benchWith, LABORATORY } from "./bench.js";

const LOADERS: Readonly<Record<string, (path: string) => unknown>> = {
  campaigns: loadCampaign,
  cells: loadCell,
  nights: loadRun,
  samples: loadSample,
  thermometers: loadThermometer,
};

// Exact texts: the message is what a user has at six in the morning.
test.each(BAD_CONFIGURATIONS)("$what", ({ file, replace, by, message }) => {
  const sound = LABORATORY[file]!;
  expect(sound).toContain(replace);
  const path = benchWith({ ...LABORATORY, [file]: sound.replace(replace, () => by) });
  const load = LOADERS[file.split("/")[0]!]!;
  expect(refusalOf(() => load(path(file)), path("/"))).toBe(message.join("\n"));
});

function refusalOf(load: () => unknown, root: string): string {
  try {
    load();
  } catch (error) {
    if (error instanceof InputError) return error.message.replaceAll(root, "");
    throw error;
  }
  return "accepted";
}

test.each([
  [
    "an empty file",
    "",
    "cells/x.yaml: expected keys and values; the file is empty.\n  Way out: see `rotonwell schema` for the keys of each kind of file",
  ],
  [
    "a file of comments",
    "# cell: thimble\n",
    "cells/x.yaml: expected keys and values; the file is empty.\n  Way out: see `rotonwell schema` for the keys of each kind of file",
  ],
  [
    "a log in place of a configuration",
    "t,R\n0,1\n",
    'cells/x.yaml:1: found "t,R 0,1"; expected keys and values, such as campaign: fjord-7.\n  Way out: begin each line with a key and a colon; is this a configuration file?',
  ],
  [
    "a file in Latin-1",
    Uint8Array.from([0x63, 0x65, 0x6c, 0x6c, 0x3a, 0x20, 0xb5]),
    "cells/x.yaml: expected a text file in UTF-8.\n  Way out: save it as UTF-8 in your editor, or write u for µ, +/- for ± and Ohm for Ω",
  ],
  [
    "a run in place of a cell",
    LABORATORY["nights/fjord-7/2026-11-14-a/run.yaml"]!,
    'cells/x.yaml:1: run is "2026-11-14-a"; expected a cell file, with a key cell.\n  Way out: this is a run file; give the one that has cell: in it',
  ],
  [
    "two documents",
    "cell: a\n---\ncell: b\n",
    "cells/x.yaml:2: expected one document.\n  Way out: put each configuration into a file of its own",
  ],
])("%s", (_, content, message) => {
  const path = benchWith({ "cells/x.yaml": content });
  expect(refusalOf(() => loadCell(path("cells/x.yaml")), path("/"))).toBe(message);
});

test("a file that is not there is named with its neighbours", () => {
  const path = benchWith(LABORATORY);
  expect(refusalOf(() => loadCell(path("cells/thimbel.yaml")), path("/"))).toBe(
    'found "cells/thimbel.yaml"; expected a file that exists.\n  Way out: the folder cells holds thimble.yaml',
  );
});

test("a folder in place of a file is said to be one", () => {
  const path = benchWith(LABORATORY);
  expect(refusalOf(() => loadCell(path("cells")), path("/"))).toBe(
    'found "cells"; expected a file; this is a folder.\n  Way out: name a file in it',
  );
});

test("two nights of one name, in whatever case, are refused", () => {
  const second = "nights/fjord-7/2026-11-15-a/run.yaml";
  const path = benchWith({
    ...LABORATORY,
    [second]: LABORATORY[second]!.replace("run: 2026-11-15-a", "run: 2026-11-14-A"),
  });
  expect(refusalOf(() => loadCampaign(path("campaigns/fjord-7.yaml")), path("/"))).toBe(
    'nights/fjord-7/2026-11-15-a/run.yaml:1: run is "2026-11-14-A"; expected a name of its own; nights/fjord-7/2026-11-14-a/run.yaml has it too.\n' +
      "  Way out: rename one of the two nights, since each keeps its results in a folder of its name",
  );
});

test("a night cannot be full and empty", () => {
  const file = "campaigns/measured-addenda.yaml";
  const path = benchWith({ ...LABORATORY, [file]: LABORATORY[file]!.replace("thimble-empty/**", "**") });
  expect(refusalOf(() => loadCampaign(path(file)), path("/"))).toBe(
    'campaigns/measured-addenda.yaml:6: addenda.runs is "../nights/**/run.yaml"; expected nights with the empty cell; nights/fjord-7/2026-11-15-a/run.yaml is also among runs.\n' +
      "  Way out: keep filled and empty nights in folders of their own, and name each once",
  );
});

test("an ullage larger than the cell is refused", () => {
  const file = "samples/fill-7.yaml";
  const wide = LABORATORY[file]!.replace("constant-volume ", "saturated-vapour ").replace("0.40 ±", "4.0 ±");
  const path = benchWith({ ...LABORATORY, [file]: wide });
  expect(refusalOf(() => loadCampaign(path("campaigns/fjord-7.yaml")), path("/"))).toBe(
    'samples/fill-7.yaml:5: vapour_space is "4.0 ± 0.05 cm3"; expected a volume below that of the cell, 3.015 ± 0.006 cm3 in cells/thimble.yaml.\n' +
      "  Way out: give the volume above the liquid, or mend the cell's volume",
  );
});

test("a pattern that finds a file of another kind says where the pattern is", () => {
  const file = "campaigns/fjord-7.yaml";
  const path = benchWith({
    ...LABORATORY,
    [file]: LABORATORY[file]!.replace("../nights/fjord-7/*/run.yaml", "../*/*.yaml"),
  });
  expect(refusalOf(() => loadCampaign(path(file)), path("/"))).toBe(
    'campaigns/fjord-7.yaml:5: runs is "../*/*.yaml"; expected a run file, with a key run.\n' +
      "  Way out: campaigns/fjord-7.yaml is a campaign file; name another",
  );
});
