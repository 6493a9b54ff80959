/** Brings the Board to life: one model, one connection, one map, the panels around it. */

import { ask } from "../../api/request.js";
import { problemText, Problem } from "../../api/problem.js";
import { Connection } from "../../live/connection.js";
import { browser } from "../../live/surroundings.js";
import { regionExtent } from "../../state/region_extent.js";
import { tilesAt } from "../../state/tile_search.js";
import { setNow } from "../shell/campaign_clock.js";
import { BestList } from "./best_list.js";
import { BoardModel } from "./board_model.js";
import { CoordinatorPanel } from "./coordinator_panel.js";
import { CoverageReader } from "./coverage_reader.js";
import { DarkStrip } from "./dark_strip.js";
import { historyCurve } from "./history_curve.js";
import { mapControls } from "./map_controls.js";
import { networkPanel } from "./network_panel.js";
import { numbersPanel } from "./numbers_panel.js";
import { recentList } from "./recent_list.js";
import { RegionPanel } from "./region_panel.js";
import { drawnFrames, drawnTiles } from "./scene.js";
import { SkyMap } from "./sky_map.js";
import { sourcePanel } from "./source_panel.js";
import { showCoordinates, tileCard } from "./tile_card.js";
import { wayLine } from "./way_line.js";

/** @param {string} name @returns {HTMLElement} */
function place(name) {
  return /** @type {HTMLElement} */ (document.querySelector(`[data-place="${name}"]`));
}

/** The map with its card, its controls and its list. @param {BoardModel} model */
function startMap(model) {
  const card = tileCard(place("tile"), model);
  /** @type {number | null} */
  let hovered = null;
  const hover = (/** @type {import("../../sky/vectors.js").Vector | null} */ v) => {
    showCoordinates(place("pointer"), v);
    hovered = v ? (tilesAt(model.laid, model.lines, v)[0] ?? null) : null;
    card.hover(hovered);
    mark();
  };
  const map = new SkyMap(place("map"), {
    onHover: hover,
    onPick: (v) => pick(v),
    onKey: (key) => nextBest(key),
    onView: () => card.hover(null),
  });
  const domes = mapControls(place("controls"), model, map, () => nextBest("n"));
  const goTo = (/** @type {number} */ number) => {
    const tile = model.state?.tiles[number];
    if (!tile) return;
    domes.forget();
    map.goTo(tile, Math.max(tile.width_deg, tile.height_deg));
    model.choose(number);
    place("map").scrollIntoView({ block: "nearest" });
  };
  const list = new BestList(place("best"), model, goTo);

  /**
   * Tapping the same place again goes on to the tile beneath.
   * @param {import("../../sky/vectors.js").Vector} v
   */
  function pick(v) {
    const numbers = tilesAt(model.laid, model.lines, v);
    const at = model.chosen === null ? -1 : numbers.indexOf(model.chosen);
    model.choose(numbers[(at + 1) % numbers.length] ?? null);
    card.hover(null);
  }

  /** @param {string} key */
  function nextBest(key) {
    if (key === "Escape") model.choose(null);
    else if (key === "n" || key === "N") {
      const { best } = list;
      const at = model.chosen === null ? -1 : best.indexOf(model.chosen);
      if (best.length > 0) goTo(best[(at + 1) % best.length]);
    } else return false;
    return true;
  }

  function mark() {
    const chosen = [hovered, model.chosen].filter((number) => number !== null);
    if (chosen.join() === map.scene.chosen.join()) return;
    map.scene.chosen = chosen;
    map.redraw({ isGlowNew: false });
  }

  keepScene(model, map);
  model.onChange((changed) => changed.has("choice") && mark());
  return map;
}

/** Regions up to this radius are shown close at first; larger ones with the whole sky. */
const CLOSE_RADIUS_DEG = 35;
/** The least tilt that lets a far southern or northern region be seen without bending the map too much. */
const MOST_TILT_DEG = 25;

/** The first view. @param {SkyMap} map @param {import("../../state/tile_pixels.js").TilePixels} pixels */
function showRegion(map, { centres, region }) {
  const { ra_deg, dec_deg, radius_deg } = regionExtent(centres, region.probabilities);
  if (radius_deg <= CLOSE_RADIUS_DEG) map.goTo({ ra_deg, dec_deg }, Math.max(2, radius_deg));
  else map.turnTo({ ra_deg, dec_deg: Math.max(-MOST_TILT_DEG, Math.min(MOST_TILT_DEG, dec_deg)) });
}

/** @param {BoardModel} model @param {SkyMap} map */
function keepScene(model, map) {
  let isShown = false;
  model.onChange((changed) => {
    if (changed.has("state")) {
      map.scene.tiles = drawnTiles(model);
      map.scene.frames = drawnFrames(model);
    }
    map.scene.now_ms = model.now_ms;
    const isGlowNew = changed.has("coverage") || map.glow !== model.glow;
    map.glow = model.glow;
    if (!isShown && model.tilePixels) showRegion(map, model.tilePixels);
    isShown ||= model.tilePixels !== null;
    map.redraw({ isGlowNew });
  });
  setInterval(() => {
    map.scene.now_ms = model.now_ms;
    map.redraw({ isGlowNew: false });
  }, 60_000);
}

/** Called by the Board's page script. */
export function startBoard() {
  const { campaign = "", person = "", role = "" } = document.body.dataset;
  const model = new BoardModel(person ? Number(person) : null);
  const reader = new CoverageReader(campaign, model, (path) => ask(path));
  const map = startMap(model);
  numbersPanel(place("numbers"), model);
  new RegionPanel(place("region"), model, { campaign, isCoordinator: role === "coordinator" });
  sourcePanel(place("source"), campaign, (path) => ask(path));
  historyCurve(place("history"), model);
  const strip = new DarkStrip(place("dark"), model, (path) => ask(path));
  networkPanel(place("network"), model);
  recentList(place("recent"), model);
  wayLine(place("way"), model);
  if (role === "coordinator") new CoordinatorPanel(place("coordinate"), model, campaign);
  const connection = new Connection(
    campaign,
    {
      onState: (held, applied) => {
        model.setState(held);
        const kinds = applied.map(({ kind }) => kind);
        if (kinds.length === 0 || kinds.includes("region.revised")) reader.wantAll();
        if (kinds.length === 0 || kinds.includes("observer.joined")) strip.forget();
      },
      onCoverage: (message) => {
        if (!model.patchCoverage(message)) reader.wantAll();
      },
      onClock: (now) => {
        setNow(now);
        model.setClock(now);
      },
      onWay: (way) => model.setWay(way),
      onStale: () => reader.wantAll(),
      onFault: (error) => model.setTrouble(error instanceof Problem ? problemText(error) : error.message),
    },
    browser,
  );
  connection.start();
  // For measuring from outside: how much script a picture takes.
  Object.assign(globalThis, { quarterskyBoard: { map, model } });
}
