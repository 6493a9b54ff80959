/** The Board. */

import { startBoard } from "../ui/board/start_board.js";

startBoard();
