/** Make an account, or a new password, by an invitation link. */

import { showJoin } from "../ui/home/join.js";
import { pageElement } from "../ui/shell/element.js";

showJoin(pageElement());
