import { describeByteSweep } from "./byte-sweep";

describeByteSweep("brackenrow", { backup: { once: 2, lasting: 11 }, run: { once: 23, lasting: 61 }, "put-back": { once: 11, lasting: 41 } }, 3300);
