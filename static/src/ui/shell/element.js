/** Builds DOM nodes. Words go in as text nodes only, so that nothing a person typed becomes markup. */

const SVG = "http://www.w3.org/2000/svg";

/** @typedef {Node|string|number|null|undefined|false} Child */

/**
 * Sets a listener (onclick: function), a property-like flag (boolean) or an attribute.
 * @param {Element} node @param {string} name @param {any} value
 */
function setOn(node, name, value) {
  if (value === undefined || value === null || value === false) return;
  if (typeof value === "function") node.addEventListener(name.replace(/^on/, ""), value);
  else node.setAttribute(name, value === true ? "" : String(value));
}

/** @param {Element} node @param {Child[]} children */
function put(node, children) {
  for (const child of children) {
    if (child === null || child === undefined || child === false) continue;
    node.append(child instanceof Node ? child : String(child));
  }
}

/**
 * @template {keyof HTMLElementTagNameMap} T
 * @param {T} tag
 * @param {Record<string, any>} [attributes]
 * @param {...(Child|Child[])} children
 * @returns {HTMLElementTagNameMap[T]}
 */
export function element(tag, attributes = {}, ...children) {
  const node = document.createElement(tag);
  for (const [name, value] of Object.entries(attributes)) setOn(node, name, value);
  put(node, children.flat());
  return node;
}

/**
 * @param {string} tag @param {Record<string, any>} [attributes] @param {...Child} children
 * @returns {SVGElement}
 */
export function svgElement(tag, attributes = {}, ...children) {
  const node = /** @type {SVGElement} */ (document.createElementNS(SVG, tag));
  for (const [name, value] of Object.entries(attributes)) setOn(node, name, value);
  put(node, children);
  return node;
}

/**
 * Replaces what a node holds and keeps the focus on the control of the same data-focus name.
 * @param {Element} node @param {...Child} children
 */
export function fill(node, ...children) {
  const active = document.activeElement;
  const name = node.contains(active) ? active?.getAttribute("data-focus") : null;
  node.replaceChildren();
  put(node, children);
  if (name) {
    /** @type {HTMLElement|null} */ (node.querySelector(`[data-focus="${CSS.escape(name)}"]`))?.focus({
      preventScroll: true,
    });
  }
}

/** The element that every page's script fills. @returns {HTMLElement} */
export function pageElement() {
  const node = document.getElementById("page");
  if (!node) throw new Error("the page has no element with id page");
  return node;
}
