import { describeByteSweep } from "./byte-sweep";

describeByteSweep("lf8", { backup: { once: 97, lasting: 499 }, run: { once: 1201, lasting: 3001 }, "put-back": { once: 907, lasting: 2411 } }, 510);
