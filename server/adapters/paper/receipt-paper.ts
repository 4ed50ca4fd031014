import { createRequire } from 'node:module'
import PDFDocument from 'pdfkit'

/** What stands on a receipt, every word of it as it is printed. */
export interface ReceiptPaper {
  number: string
  school: { name: string, address: string }
  /** Who paid. */
  from: string
  receivedOn: string
  /** "Deposit for a bench place in Cinder (CIN-26), ..." */
  what: string
  how: string
  amount: string
  /** Amounts under it, top to bottom: what the place costs, what was paid before, what is still to pay. */
  sums: { label: string, amount: string }[]
  /** Last lines. */
  notes: string[]
  issuedAt: Date
}

const ink = '#1b2023'
const quiet = '#58616a'
const layoutBlue = '#14285e'
const hairline = '#d3d8d5'
const margin = 60
const amountColumn = 130

/** For the metadata, which the library writes into XML as it is given. */
const plain = (text: string): string => text.replaceAll('&', 'and').replace(/[<>\p{Cc}]/gu, ' ')

/**
 * A receipt as PDF: one A4 page, tagged (PDF/UA-1) with headings, paragraphs and a table whose row headings are marked, in English, with
 * its own letters embedded, so that a reader reads it aloud in order and every name prints.
 *
 * The same paper gives the same bytes: nothing in it comes from the clock or from chance. Rows of a table must fit one page; ours do.
 */
export function drawReceipt(paper: ReceiptPaper): Promise<Uint8Array> {
  // Not at the top: in the build this module's address is known only once the process has started.
  const require = createRequire(import.meta.url)
  const title = `Receipt ${paper.number}, ${paper.school.name}`
  const regular = require.resolve('dejavu-fonts-ttf/ttf/DejaVuSans.ttf')
  const bold = require.resolve('dejavu-fonts-ttf/ttf/DejaVuSans-Bold.ttf')
  const doc = new PDFDocument({
    size: 'A4', margin, font: regular, pdfVersion: '1.7', lang: 'en-GB', tagged: true, displayTitle: true,
    // The types do not know this subset yet; the library does.
    subset: 'PDF/UA' as string,
    info: { Title: plain(title), Author: plain(paper.school.name), Subject: plain(paper.what), Producer: 'Witness Mark', Creator: 'Witness Mark', CreationDate: paper.issuedAt, ModDate: paper.issuedAt },
  } as PDFKit.PDFDocumentOptions)
  const width = doc.page.width - 2 * margin
  const root = doc.struct('Document')
  doc.addStructure(root)

  const block = (tag: string, size: number, text: string, { font = regular, colour = ink, gap = 8 } = {}) => {
    root.add(doc.struct(tag, {}, () => {
      doc.font(font).fontSize(size).fillColor(colour).text(text, margin, doc.y, { width })
    }))
    doc.y += gap
  }
  // What only looks is marked as such, so that nobody has it read aloud.
  const look = (draw: () => void) => {
    doc.markContent('Artifact', { type: 'Layout' })
    draw()
    doc.endMarkedContent()
  }

  look(() => doc.rect(0, 0, doc.page.width, 14).fill(layoutBlue))
  doc.y = margin
  block('P', 11, paper.school.name, { font: bold, gap: 2 })
  if (paper.school.address !== '') block('P', 9, paper.school.address, { colour: quiet })
  doc.y += 28
  block('H1', 22, `Receipt ${paper.number}`, { font: bold, colour: layoutBlue, gap: 18 })
  block('P', 11, `Received from ${paper.from} on ${paper.receivedOn}, ${paper.how}.`)
  block('P', 11, paper.what, { gap: 18 })

  const table = doc.struct('Table', { title: 'Amounts' })
  root.add(table)
  for (const [at, { label, amount }] of [{ label: 'Received', amount: paper.amount }, ...paper.sums].entries()) {
    const font = at === 0 ? bold : regular
    const size = at === 0 ? 13 : 11
    const top = doc.y
    look(() => doc.moveTo(margin, top).lineTo(margin + width, top).lineWidth(0.75).stroke(hairline))
    const row = doc.struct('TR')
    table.add(row)
    let bottom = top
    const cell = (tag: string, options: Record<string, string>, text: string, x: number, cellWidth: number, align: 'left' | 'right') => {
      row.add(doc.struct(tag, options, () => {
        doc.font(font).fontSize(size).fillColor(ink).text(text, x, top + 8, { width: cellWidth, align })
        bottom = Math.max(bottom, doc.y + 6)
      }))
    }
    cell('TH', { scope: 'Row' }, label, margin, width - amountColumn - 10, 'left')
    cell('TD', {}, amount, margin + width - amountColumn, amountColumn, 'right')
    row.end()
    doc.y = bottom
  }
  table.end()
  doc.y += 24
  for (const note of paper.notes) block('P', 10, note, { colour: quiet })
  root.end()

  return new Promise((done, failed) => {
    const chunks: Uint8Array[] = []
    doc.on('data', (chunk: Uint8Array) => chunks.push(chunk))
    doc.on('end', () => done(Buffer.concat(chunks)))
    doc.on('error', failed)
    doc.end()
  })
}
