export default defineEventHandler(() => serverReady())
