/** Tonight: the tile to shoot now, and the report of what was shot. */

import { pageElement } from "../ui/shell/element.js";
import { showTonight } from "../ui/tonight/tonight_page.js";

showTonight(pageElement());
