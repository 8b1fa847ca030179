import { Button } from '../../ui/Button';

interface PageToolsProps {
  page: number;
  pages: number;
  onPage(page: number): void;
  larger?: number;
  smaller?: number;
  onZoom(zoom: number): void;
  onTurn(): void;
  /** Address of the window of their own; none: they are in it. */
  beside?: string;
}

/** Page by page, larger, turned, beside. */
export function PageTools({ page, pages, onPage, larger, smaller, onZoom, onTurn, beside }: PageToolsProps) {
  return (
    <div className="page-tools" role="group" aria-label="Page">
      <span>{`page ${page} of ${pages}`}</span>
      {page > 1 && (
        <Button kind="quiet" onClick={() => onPage(page - 1)}>
          back
        </Button>
      )}
      {page < pages && (
        <Button kind="quiet" onClick={() => onPage(page + 1)}>
          next
        </Button>
      )}
      <span className="grow" />
      {smaller !== undefined && (
        <Button kind="quiet" onClick={() => onZoom(smaller)}>
          smaller
        </Button>
      )}
      {larger !== undefined && (
        <Button kind="quiet" onClick={() => onZoom(larger)}>
          larger
        </Button>
      )}
      <Button kind="quiet" onClick={onTurn}>
        turn
      </Button>
      {beside && (
        <Button kind="quiet" onClick={() => window.open(beside, 'counterlag-pages', 'popup,width=900,height=1100')}>
          open beside
        </Button>
      )}
    </div>
  );
}
