// @ts-check
import withNuxt from './.nuxt/eslint.config.mjs'

export default withNuxt({
  ignores: ['drizzle/**', 'public/**'],
}, {
  // How lines break is the writer's choice; what they say is the linter's business.
  rules: {
    'vue/max-attributes-per-line': 'off',
    'vue/singleline-html-element-content-newline': 'off',
    'vue/multiline-html-element-content-newline': 'off',
    'vue/html-closing-bracket-newline': 'off',
    'vue/first-attribute-linebreak': 'off',
    'vue/html-self-closing': 'off',
    'vue/attributes-order': 'off',
    'vue/html-indent': 'off',
    'vue/multi-word-component-names': 'off',
    'vue/require-default-prop': 'off',
    '@stylistic/multiline-ternary': 'off',
    '@stylistic/no-mixed-operators': 'off',
    '@stylistic/quote-props': 'off',
    '@stylistic/indent-binary-ops': 'off',
    '@stylistic/max-statements-per-line': ['error', { max: 2 }],
  },
})
