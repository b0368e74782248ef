import type { Config } from "tailwindcss";

export default {
  content: [],
  theme: {
    extend: {
      colors: {
        paper: "#F6F3EC",
        sheet: "#FFFDF8",
        ink: "#16213A",
        "ink-soft": "#55607A",
        rule: "#D9D2C3",
        tail: "#C43E1C",
        pick: "#0B6E69",
      },
      fontFamily: {
        text: ["Barlow", "system-ui", "sans-serif"],
        table: ["Barlow Semi Condensed", "Barlow", "system-ui", "sans-serif"],
      },
    },
  },
} satisfies Config;
