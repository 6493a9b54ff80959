/** The campaigns. */

import { showHome } from "../ui/home/campaign_list.js";
import { pageElement } from "../ui/shell/element.js";

showHome(pageElement());
