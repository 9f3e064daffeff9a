import { Fragment, type ReactNode } from 'react';
import { Length } from '#components/ui/Length.tsx';
import { Notice } from '#components/ui/Notice.tsx';
import { lengthFormat } from '#lib/plan/length-format.ts';
import { formatLength } from '#lib/units/format-length.ts';
import type { ResolvedProse, ResolvedProseNode, UnitSystem } from '#lib/plan/types.ts';
import { cautionTitle } from '#lib/plan/caution-titles.ts';

/** A picture as the page can show it. */
export interface ShownPicture {
  href: string;
  width: number;
  height: number;
}

interface ProseViewProps {
  prose: ResolvedProse;
  units: UnitSystem;
  /** Pictures by the name that the text uses; one that is missing is left out. */
  pictures: Readonly<Record<string, ShownPicture>>;
  /** The level that the first heading in the prose takes on this page. */
  headingLevel?: 2 | 3 | 4;
  /** What stands at a place such as the parts table; left out where the page puts those elsewhere. */
  renderPlace?: (node: Extract<ResolvedProseNode, { node: 'place' }>) => ReactNode;
}

/** A plan's prose at a fit. Every node comes from the plan's allow-list; nothing here is read as markup. */
export function ProseView(props: ProseViewProps) {
  return (
    <>
      {props.prose.map((node, index) => (
        <Node key={index} {...props} node={node} />
      ))}
    </>
  );
}

function Node(props: ProseViewProps & { node: ResolvedProseNode }) {
  const { node, units, pictures, headingLevel = 3 } = props;
  const inner = (children: ResolvedProse) => <ProseView {...props} prose={children} />;
  switch (node.node) {
    case 'text':
      return node.text;
    case 'paragraph':
      return <p>{inner(node.children)}</p>;
    case 'quote':
      return <blockquote>{inner(node.children)}</blockquote>;
    case 'emphasis':
      return <em>{inner(node.children)}</em>;
    case 'strong':
      return <strong>{inner(node.children)}</strong>;
    case 'strike':
      return <s>{inner(node.children)}</s>;
    case 'break':
      return <br />;
    case 'rule':
      return <hr />;
    case 'code':
      return node.block ? (
        <pre>
          <code>{node.text}</code>
        </pre>
      ) : (
        <code>{node.text}</code>
      );
    case 'link':
      return (
        <a href={node.href} rel="nofollow ugc noopener">
          {inner(node.children)}
        </a>
      );
    case 'heading': {
      const level = Math.min(6, headingLevel + node.depth - 1);
      const Heading = `h${level}` as 'h2' | 'h3' | 'h4' | 'h5' | 'h6';
      return <Heading>{inner(node.children)}</Heading>;
    }
    case 'list': {
      const items = node.items.map((item, index) => <li key={index}>{inner(item)}</li>);
      return node.ordered ? <ol start={node.start ?? 1}>{items}</ol> : <ul>{items}</ul>;
    }
    case 'table': {
      const [head, ...rows] = node.rows;
      return (
        <div className="table-scroll" tabIndex={0} role="region" aria-label="Table">
          <table className="data-table">
            <thead>
              <tr>
                {(head ?? []).map((cell, index) => (
                  <th key={index} scope="col">
                    {inner(cell)}
                  </th>
                ))}
              </tr>
            </thead>
            <tbody>
              {rows.map((row, rowIndex) => (
                <tr key={rowIndex}>
                  {row.map((cell, index) => (
                    <td key={index}>{inner(cell)}</td>
                  ))}
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      );
    }
    case 'value':
      return node.kind === 'length' && typeof node.value === 'number' ? (
        <Length length={formatLength(node.value, lengthFormat(units))} />
      ) : (
        <span className="figure">{node.text}</span>
      );
    case 'picture':
    case 'figure': {
      const picture = pictures[node.src];
      if (!picture) return null;
      const image = (
        <img src={picture.href} width={picture.width} height={picture.height} alt={node.alt} loading="lazy" />
      );
      return node.node === 'figure' ? (
        <figure>
          {image}
          {node.caption ? <figcaption>{node.caption}</figcaption> : null}
        </figure>
      ) : (
        image
      );
    }
    case 'caution':
      return (
        <Notice kind="caution" title={cautionTitle(node.about)}>
          <p>{node.text}</p>
        </Notice>
      );
    case 'step':
      return null;
    case 'place':
      return <Fragment>{props.renderPlace?.(node)}</Fragment>;
  }
}
