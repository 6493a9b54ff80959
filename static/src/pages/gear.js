/** My gear: sites, instruments, tokens. */

import { showGear } from "../ui/gear/gear_page.js";
import { pageElement } from "../ui/shell/element.js";

showGear(pageElement());
