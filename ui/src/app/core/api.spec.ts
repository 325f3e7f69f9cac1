import { provideHttpClient } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestBed } from '@angular/core/testing';
import { listCatalogueEvents, uploadCatalogueVersion } from '@leanyear/contract/catalogues';
import { updateSubmission } from '@leanyear/contract/submissions';
import { Api, type UploadStep } from './api';

function open() {
  TestBed.configureTestingModule({ providers: [provideHttpClient(), provideHttpClientTesting()] });
  return { api: TestBed.inject(Api), server: TestBed.inject(HttpTestingController) };
}

describe('a call to a route of the contract', () => {
  it('fills in the path, says which version was read, and sends the body', () => {
    const { api, server } = open();
    api.send(updateSubmission, { params: { id: 'a b' }, body: { note: 'n' }, ifMatch: 7 }).subscribe();
    const { request } = server.expectOne('/api/v1/submissions/a%20b');
    expect(request.method).toBe('PATCH');
    expect(request.headers.get('If-Match')).toBe('"7"');
    expect(request.body).toEqual({ note: 'n' });
  });

  it('leaves out of the query what is not given', () => {
    const { api, server } = open();
    api
      .send(listCatalogueEvents, { params: { id: '1' }, query: { limit: 50, search: undefined } })
      .subscribe();
    server.expectOne('/api/v1/catalogue-versions/1/events?limit=50');
  });

  it('sends a file as a form and tells how far it is', () => {
    const { api, server } = open();
    const steps: UploadStep<unknown>[] = [];
    api
      .upload(uploadCatalogueVersion, { params: { id: '1' } }, new File(['abc'], 'wind.csv'))
      .subscribe((step) => steps.push(step));
    const call = server.expectOne('/api/v1/catalogues/1/versions');
    expect((call.request.body as FormData).get('file')).toMatchObject({ name: 'wind.csv' });
    call.event({ type: 1, loaded: 2, total: 3 });
    call.flush({ number: 1 });
    expect(steps).toEqual([{ sent: 2, total: 3 }, { reply: { number: 1 } }]);
  });
});
