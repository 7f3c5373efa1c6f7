import { describeByteSweep } from "./byte-sweep";

describeByteSweep("lf8", { backup: { once: 79, lasting: 401 }, run: { once: 907, lasting: 2411 }, "put-back": { once: 701, lasting: 1801 } }, 640);
