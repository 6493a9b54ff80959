/** From an alert file to a campaign. */

import { showLaunch } from "../ui/launch/launch_page.js";
import { pageElement } from "../ui/shell/element.js";

showLaunch(pageElement());
