import "vuetify/styles/core";
import { createVuetify } from "vuetify";
import { aliases, mdi } from "vuetify/iconsets/mdi-svg";

/**
 * Vuetify's parts without its theme: colours come from styles/tokens.css, so that nothing writes a style sheet at run
 * time and the content policy needs no exception for one.
 */
export const vuetify = createVuetify({
  theme: false,
  icons: { defaultSet: "mdi", aliases, sets: { mdi } },
  defaults: {
    global: { ripple: false, elevation: 0 },
    VBtn: { variant: "outlined" },
    VTextField: { variant: "outlined", density: "compact", hideDetails: "auto" },
    VTextarea: { variant: "outlined", density: "compact", hideDetails: "auto", rows: 3, autoGrow: true },
    VSelect: { variant: "outlined", density: "compact", hideDetails: "auto" },
    VCheckbox: { density: "compact", hideDetails: "auto" },
  },
});
