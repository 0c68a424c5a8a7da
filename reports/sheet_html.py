"""A calculation sheet as one self-contained, print-ready HTML file."""

from html import escape

from .sheet import Block, Bullets, Heading, Paragraph, Sheet, blocks

_STYLE = """
body { font: 10pt/1.4 system-ui, sans-serif; max-width: 60rem; margin: 2rem auto; padding: 0 1rem; color: #111; }
h1 { font-size: 1.5rem; } h2 { font-size: 1.15rem; border-bottom: 1px solid #999; margin-top: 1.6rem; } h3 { font-size: 1rem; }
table { border-collapse: collapse; width: 100%; } th, td { border: 1px solid #bbb; padding: .15rem .4rem; text-align: left; }
th { background: #eee; } tr, h3 { break-inside: avoid; } h2, h3 { break-after: avoid; }
@media print { body { margin: 0; max-width: none; } }
"""


def sheet_html(sheet: Sheet) -> str:
    """The sheet as an HTML document; every text in it is data."""
    title = escape(f"{sheet.told.part}: {sheet.requirement.title or sheet.requirement.duty}")
    body = "\n".join(_block(block) for block in blocks(sheet))
    head = f'<meta charset="utf-8"><title>{title}</title><style>{_STYLE}</style>'
    return f'<!DOCTYPE html>\n<html lang="en"><head>{head}</head><body>\n{body}\n</body></html>\n'


def _block(block: Block) -> str:
    if isinstance(block, Heading):
        return f"<h{block.depth}>{escape(block.text)}</h{block.depth}>"
    if isinstance(block, Paragraph):
        return f"<p>{escape(block.text)}</p>"
    if isinstance(block, Bullets):
        return "<ul>" + "".join(f"<li>{escape(item)}</li>" for item in block.items) + "</ul>"
    head = "".join(f"<th>{escape(cell)}</th>" for cell in block.head)
    rows = "".join("<tr>" + "".join(f"<td>{escape(cell)}</td>" for cell in row) + "</tr>" for row in block.rows)
    return f"<table><thead><tr>{head}</tr></thead><tbody>{rows}</tbody></table>"
