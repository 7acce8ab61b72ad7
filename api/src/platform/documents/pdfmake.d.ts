declare module 'pdfmake/fonts/Roboto.js' {
  const fonts: { Roboto: { normal: string; bold: string; italics: string; bolditalics: string } }
  export default fonts
}
