import { describeByteSweep } from "./byte-sweep";

describeByteSweep("ternwick", { backup: { once: 5, lasting: 17 }, run: { once: 23, lasting: 61 }, "put-back": { once: 11, lasting: 41 } }, 2000);
